import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { analyseRun } from '@shared/analysis/analyseRun';
import { Analysis } from '@shared/schemas/analysis';
import type { EditChange } from '@shared/schemas/edit';
import { RawEdit } from '@shared/schemas/edit';
import { RawRun } from '@shared/schemas/run';
import { anyChange, anyRun } from '../../factories/anyRun';
import { noise } from '../../factories/noise';
import {
  angleReading,
  evenTimes,
  rawEdits,
  rawGateRun,
  rawKeyedRun,
  rawSplitsRun,
  rawTapRun,
  sealed,
  stringRig,
} from '../../factories/rawRuns';

function analysed(run: RawRun, ...changes: EditChange[]): Analysis {
  return analyseRun({ run: sealed(run), edits: rawEdits(run, ...changes).map(sealed) });
}

/** Taps of a hand with 30 ms jitter, the same every time. */
function jittered(n: number, lap: number, seed = 1): number[] {
  const { normal } = noise(seed);
  return evenTimes(n, lap).map((t) => t + 0.03 * normal());
}

describe('analyseRun', () => {
  test('of any run and edits that keep their schemas keeps its own, so no number is NaN or infinite', () => {
    fc.assert(
      fc.property(anyRun, fc.array(anyChange, { maxLength: 5 }), (run, changes) => {
        RawRun.parse(run);
        for (const edit of rawEdits(run, ...changes)) RawEdit.parse(edit);
        expect(() => Analysis.parse(analysed(run, ...changes))).not.toThrow();
      }),
      { numRuns: 200 },
    );
  }, 60_000);

  test('with an amplitude of next to nothing reckons with none of its losses', () => {
    const sideways = { form: 'sideways' as const, sideways_um: 1, length_um: 10_000_000 };
    const analysis = analysed(
      rawTapRun({ times: evenTimes(11, 2), amplitudes: [{ swing: 0, as_read: sideways, u: 0 }] }),
    );
    expect(() => Analysis.parse(analysis)).not.toThrow();
    expect(analysis.small_period_s!.value).toBeCloseTo(2, 9);
    expect(analysis.motion).toBeNull();
  });

  test('with all times scaled scales T0 and its type A uncertainty', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 50 }), fc.double({ min: 0.3, max: 3, noNaN: true }), (seed, scale) => {
        const amplitudes = [angleReading(0, 20), angleReading(20, 15)];
        const times = jittered(21, 2, seed);
        const plain = analysed(rawTapRun({ times, amplitudes }));
        const scaled = analysed(rawTapRun({ times: times.map((t) => t * scale), amplitudes }));
        expect(scaled.small_period_s!.value / plain.small_period_s!.value).toBeCloseTo(scale, 5);
        const timing = (analysis: Analysis) => analysis.budget.find(({ term }) => term === 'timing')!.u;
        expect(timing(scaled) / timing(plain)).toBeCloseTo(scale, 3);
      }),
      { numRuns: 40 },
    );
  }, 60_000);

  test('does not care when the run began', () => {
    const times = jittered(21, 2);
    const later = rawTapRun({ times: times.map((t) => t + 5), made: { ...rawTapRun().made, wall_ms: 5 } });
    const { input_digest, ...plain } = analysed(rawTapRun({ times }));
    expect(analysed(later)).toMatchObject({ ...plain, marks: expect.anything() });
    expect(analysed(later).input_digest).not.toBe(input_digest);
  });

  test('of a run with one mark lost and its gap inserted gives T0 back within its uncertainty', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 19 }), fc.integer({ min: 1, max: 30 }), (lost, seed) => {
        const amplitudes = [angleReading(0, 20), angleReading(20, 15)];
        const times = jittered(21, 2, seed);
        const whole = analysed(rawTapRun({ times, amplitudes }));
        const holed = rawTapRun({ times: times.filter((_, i) => i !== lost), amplitudes });
        const mended = analysed(holed, { kind: 'insert_gap', before_mark: lost, count: 1 });
        expect(mended.swings).toBe(20);
        expect(Math.abs(mended.small_period_s!.value - whole.small_period_s!.value)).toBeLessThan(
          whole.small_period_s!.u,
        );
        expect(mended.flags.filter(({ code, answered }) => code === 'missed' && !answered)).toEqual([]);
      }),
      { numRuns: 40 },
    );
  }, 60_000);

  test('has another key for another method, run or order of edits, and the same for the same', () => {
    const run = rawTapRun();
    const count = (swings: number): EditChange => ({ kind: 'set_swings', swings });
    const [a, b] = [analysed(run, count(20), count(21)), analysed(run, count(21), count(20))];
    expect(a.input_digest).not.toBe(b.input_digest);
    expect(analysed(run, count(20), count(21))).toEqual(a);
  });

  test('is the same with a note, or with an edit that was withdrawn, as without: figures, flags and key', () => {
    const run = rawTapRun({ times: jittered(21, 2) });
    const leaveOut: EditChange = { kind: 'leave_out_mark', mark: 5 };
    const note: EditChange = { kind: 'note', text: 'a draught from the window' };
    const withdraw = (made_seq: number): EditChange => ({
      kind: 'withdraw',
      edit_id: rawEdits(run, note, note)[made_seq - 1]!.id,
    });
    expect(analysed(run, note)).toEqual(analysed(run));
    expect(analysed(run, leaveOut, withdraw(1))).toEqual(analysed(run));
    expect(analysed(run, note, leaveOut, withdraw(1))).toEqual(analysed(run, note, leaveOut));
    expect(analysed(run, leaveOut).input_digest).not.toBe(analysed(run).input_digest);
  });

  test('states the budget of T while T0 is not known, and what would bring T0', () => {
    const analysis = analysed(rawTapRun({ times: jittered(21, 2) }));
    expect(analysis.small_period_s).toBeNull();
    expect(analysis.period_s!.value).toBeCloseTo(2, 2);
    expect(Math.hypot(...analysis.budget.map(({ u }) => u))).toBeCloseTo(analysis.period_s!.u, 12);
    expect(analysis.missing).toEqual(['amplitude', 'length']);
  });

  test('allows for a decay nobody read, and asks for the end amplitude', () => {
    const times = jittered(21, 2);
    const one = analysed(rawTapRun({ times, amplitudes: [angleReading(0, 20)] }));
    const two = analysed(rawTapRun({ times, amplitudes: [angleReading(0, 20), angleReading(20, 15)] }));
    expect(one.missing).toContain('end_amplitude');
    expect(one.amplitude!.decay_known).toBe(false);
    expect(one.small_period_s!.u).toBeGreaterThan(1.5 * two.small_period_s!.u);
    expect(Math.abs(one.small_period_s!.value - two.small_period_s!.value)).toBeLessThan(2 * one.small_period_s!.u);
  });

  test('gives g = 4π²L/T0² with twice the relative uncertainty of T0 and once that of L', () => {
    const analysis = analysed(
      rawTapRun({ times: jittered(21, 2), amplitudes: [angleReading(0, 10), angleReading(20, 9)], rig: stringRig() }),
    );
    const { small_period_s: period, g_m_s2: g, length_m: length } = analysis;
    expect(g!.value).toBeCloseTo((4 * Math.PI ** 2 * 1) / period!.value ** 2, 12);
    expect(g!.u / g!.value).toBeCloseTo(Math.hypot((2 * period!.u) / period!.value, length!.u / length!.value), 12);
    expect(analysis.g_budget.map(({ term }) => term)).toContain('length');
  });

  test('corrects g for what the rig says of masses, on lines of their own and with their doubt in the budget', () => {
    const taps = { times: jittered(21, 2), amplitudes: [angleReading(0, 10), angleReading(20, 9)] };
    const bare = analysed(rawTapRun({ ...taps, rig: stringRig() }));
    const rig = stringRig({ bob_diameter_um: 30_000, bob_mass_mg: 110_977, string_mass_mg: 300 });
    const whole = analysed(rawTapRun({ ...taps, rig }));
    expect(bare.corrections).toEqual([]);
    expect(whole.corrections.map(({ term }) => term)).toEqual(['string_mass', 'buoyancy', 'added_mass', 'finite_bob']);
    // corrections.json, at 2.006 s; the T0 of these taps differs by less than 1 %. Twice the sum of the lines, of g.
    const expected = 2 * (4.5e-5 - 2.25e-4 + 7.64e-5 + 7.38e-5);
    expect(whole.g_m_s2!.value / bare.g_m_s2!.value - 1).toBeCloseTo(expected, 6);
    const sum = whole.corrections.reduce((all, line) => all + line.g_m_s2, 0);
    expect(whole.g_m_s2!.value - bare.g_m_s2!.value).toBeCloseTo(sum, 5);
    expect(whole.g_budget.map(({ term }) => term)).toEqual([
      ...whole.budget.map(({ term }) => term),
      ...['length', 'air', 'string'],
    ]);
    expect(whole.small_period_s).toEqual(bare.small_period_s);
  });

  test('gives g for a bar with a bob once both are weighed, and says before that what is missing', () => {
    // physical-pendulum.json, rod_plus_bob: T0 = 1.76815543721 s at g = 9.80665.
    const rig = stringRig({
      kind: 'bar_bob',
      length_readings: [{ to: 'centre', um: 800_000 }],
      bob_diameter_um: 60_000,
      bar_length_um: 900_000,
      pivot_offset_um: 450_000,
      bar_mass_mg: 120_000,
    });
    const run = (parts: typeof rig) =>
      analysed(rawTapRun({ times: evenTimes(21, 1.76815543721), amplitudes: [angleReading(0, 0.001, 0)], rig: parts }));
    expect(run(rig)).toMatchObject({ g_m_s2: null, length_m: null });
    expect(run(rig).missing).toContain('bob_mass');
    // Marks are kept in whole microseconds.
    expect(run({ ...rig, bob_mass_mg: 500_000 }).g_m_s2!.value).toBeCloseTo(9.80665, 5);
  });

  test('takes the counter at his word: counted from one is a swing fewer', () => {
    expect(analysed(rawKeyedRun({ counted_to: 21, first_count: 'one', total: 40 })).period_s!.value).toBeCloseTo(2, 12);
    expect(analysed(rawKeyedRun({ counted_to: 20, first_count: 'not_sure', total: 40 })).swings).toBe(20);
    const nothing = analysed(rawKeyedRun({ counted_to: 1, first_count: 'one', total: 2 }));
    expect(nothing.period_s).toBeNull();
    expect(nothing.missing).toContain('swings');
  });

  test('gives a keyed total the jitter of two presses by hand', () => {
    // 0.07 s a press: Am. J. Phys. 87, 110 (2019).
    const { budget } = analysed(rawKeyedRun({ counted_to: 20, total: 40 }));
    expect(budget.find(({ term }) => term === 'hand')!.u).toBeCloseTo((0.07 * Math.SQRT2) / 20, 12);
  });

  test('reads splits and taps of the same times alike', () => {
    const times = [0, 2.01, 3.97, 6.03, 8, 10.02, 11.98, 14.01, 16.03, 17.99];
    expect(analysed(rawSplitsRun({ times })).period_s!.value).toBe(analysed(rawTapRun({ times })).period_s!.value);
  });

  test.each([0.05, 0.3])('is not moved by a mark %d s off centre when every pass is tapped', (limp) => {
    const times = Array.from({ length: 22 }, (_, i) => i + (i % 2) * limp);
    const analysis = analysed(rawTapRun({ times, capture: { swings_per_mark: 0.5 } }));
    expect(analysis.period_s!.value).toBeCloseTo(2, 9);
    expect(analysis.jitter_s).toBeLessThan(1e-6);
  });

  test('says nothing about two blocks of a gate, and takes every second of three as a swing', () => {
    expect(
      analysed(
        rawGateRun({
          blocks: [
            [0, 0.02],
            [0.9, 0.92],
          ],
        }),
      ).period_s,
    ).toBeNull();
    const three = analysed(
      rawGateRun({
        blocks: [
          [0, 0.02],
          [0.9, 0.92],
          [2, 2.02],
        ],
      }),
    );
    expect(three.period_s!.value).toBeCloseTo(2, 9);
  });

  test('leaves the row of a mark that is left out, without swing and residual', () => {
    const { marks, marks_used } = analysed(rawTapRun({ times: jittered(21, 2) }), { kind: 'leave_out_mark', mark: 4 });
    expect(marks_used).toBe(20);
    expect(marks[4]).toMatchObject({ swing: null, residual_s: null, lap_s: null });
    expect(marks[5]).toMatchObject({ swing: 5, lap_s: marks[5]!.time_s - marks[3]!.time_s });
  });
});
