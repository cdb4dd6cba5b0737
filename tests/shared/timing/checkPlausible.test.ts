import { describe, expect, test } from 'vitest';
import { flagsOf, jittered, namesOf } from '../../factories/flagged';
import { angleReading, rawKeyedRun, rawTapRun, stringRig } from '../../factories/rawRuns';

const amplitudes = [angleReading(0, 10), angleReading(20, 9)];
const times = jittered(21, 2.0102, 0.03);
const rigOf = (um: number) => stringRig({ length_readings: [{ to: 'centre', um }] });

describe('implausible', () => {
  test.each([100_000, 10_000_000, 800_000])('is a length of %d µm for a pendulum of 1 m', (um) => {
    const [flag] = flagsOf(rawTapRun({ times, amplitudes, rig: rigOf(um) }));
    expect(flag).toMatchObject({ code: 'implausible', mark: null, choices: ['keep_flagged'] });
    // g = 4π²L/T0² with T0 of 1 m.
    expect(flag!.seen.g_m_s2! / (9.8 * um * 1e-6)).toBeCloseTo(1, 1);
  });

  test('is none for the right length, nor for one that is a little off', () => {
    expect(namesOf(rawTapRun({ times, amplitudes, rig: rigOf(1_000_000) }))).toEqual([]);
    expect(namesOf(rawTapRun({ times, amplitudes, rig: rigOf(950_000) }))).toEqual([]);
  });

  test('is an amplitude that grows, and none that grows within what it is read to', () => {
    const grown = [angleReading(0, 10), angleReading(10, 9), angleReading(20, 20)];
    const [flag] = flagsOf(rawTapRun({ times, amplitudes: grown }));
    expect(flag).toMatchObject({ code: 'implausible', seen: { swing: 20 } });
    expect(flag!.seen.earlier_deg).toBeCloseTo(9, 9);
    expect(flag!.seen.later_deg).toBeCloseTo(20, 9);
    expect(namesOf(rawTapRun({ times, amplitudes: [angleReading(0, 10), angleReading(20, 11)] }))).toEqual([]);
  });

  test('is a total of 20 swings in 3.8 s, as if minutes or a few swings had been timed', () => {
    const [flag] = flagsOf(rawKeyedRun({ counted_to: 20, total: 3.82 }));
    expect(flag).toMatchObject({ code: 'implausible' });
    expect(flag!.seen.period_ms).toBeCloseTo(191, 9);
  });

  test('gives way to a count that explains the same', () => {
    const written = rawKeyedRun({ counted_to: 20, total: 19 * 2.0095, rig: stringRig(), amplitudes });
    expect(namesOf(written)).toEqual(['count_from_one']);
  });
});
