import { describe, expect, test } from 'vitest';
import { flagsOf, jittered, namesOf } from '../../factories/flagged';
import { rawKeyedRun, rawSplitsRun, rawTapRun } from '../../factories/rawRuns';

const typed = (step: number) => jittered(11, 2.013, 0.03).map((t) => Math.round(t / step) * step);

describe('round_numbers', () => {
  test('are splits that all end on the tenth of a stopwatch of hundredths', () => {
    const [flag, ...others] = flagsOf(rawSplitsRun({ times: typed(0.1) }));
    expect(others).toEqual([]);
    expect(flag).toMatchObject({ code: 'round_numbers', seen: { readings: 10, round_s: 0.1, step_s: 0.01 } });
    expect(namesOf(rawSplitsRun({ times: typed(0.01) }))).toEqual([]);
  });

  test('are none on a stopwatch that shows no more', () => {
    const capture = { reading_step_us: 100_000 };
    expect(namesOf(rawSplitsRun({ times: typed(0.1), capture }))).toEqual([]);
  });

  test('are none where the swing itself keeps to the round numbers', () => {
    const times = jittered(11, 2, 0.012).map((t) => Math.round(50 * t) / 50);
    expect(namesOf(rawSplitsRun({ times, capture: { reading_step_us: 20_000 } }))).toEqual([]);
  });

  test('a single total is one on a whole ten seconds, and not on a whole second, which one in a hundred has', () => {
    expect(namesOf(rawKeyedRun({ total: 40 }))).toEqual(['round_numbers']);
    expect(namesOf(rawKeyedRun({ total: 41 }))).toEqual([]);
  });

  test('are splits evener than any hand, and those of a steady hand are not', () => {
    const times = (jitter: number) => jittered(15, 2.013, jitter).map((t) => Math.round(100 * t) / 100);
    const [flag] = flagsOf(rawSplitsRun({ times: times(0) }));
    expect(flag).toMatchObject({ code: 'round_numbers', seen: { readings: 14 } });
    expect(flag!.seen.scatter_ms).toBeLessThan(5);
    expect(namesOf(rawSplitsRun({ times: times(0.015) }))).toEqual([]);
  });

  test('are no matter for taps, which nobody types', () => {
    expect(namesOf(rawTapRun({ times: jittered(21, 2, 0) }))).toEqual([]);
  });
});
