import { describe, expect, test } from 'vitest';
import { flagsOf, jittered, namesOf } from '../../factories/flagged';
import { evenTimes, rawGateRun, rawTapRun } from '../../factories/rawRuns';

const everyPass = { swings_per_mark: 0.5 } as const;
const limping = (times: number[], by: number) => times.map((t, i) => t + (i % 2) * by);

describe('off_centre', () => {
  test('is told in seconds: a mark 5 mm beside the lowest point at 90 mm amplitude, 71 ms between the halves', () => {
    // 4/ω asin(5/90) for T = 2 s: 2 · 35 ms. The tap after the first half comes by half of that later.
    const [flag, ...others] = flagsOf(rawTapRun({ times: limping(jittered(41, 1, 0.01), 0.0354), capture: everyPass }));
    expect(others).toEqual([]);
    expect(flag).toMatchObject({ code: 'off_centre', mark: null, choices: ['keep_flagged'] });
    expect(flag!.seen.longer_s).toBeCloseTo(1.035, 2);
    expect(flag!.seen.shorter_s).toBeCloseTo(0.965, 2);
    expect(Math.abs(flag!.seen.difference_ms! - 71)).toBeLessThan(10);
  });

  test('is found whichever half is the longer, and at a gate without a flag width', () => {
    expect(namesOf(rawTapRun({ times: limping(jittered(41, 1, 0.01), -0.05), capture: everyPass }))).toEqual([
      'off_centre',
    ]);
    const blocks = limping(evenTimes(21, 1), 0.02).map((t): [number, number] => [t, t + 0.02]);
    expect(namesOf(rawGateRun({ blocks }))).toEqual(['off_centre']);
  });

  test('is not found in what jitter alone makes, nor where every swing has one mark', () => {
    expect(namesOf(rawTapRun({ times: limping(jittered(21, 1, 0.05), 0.01), capture: everyPass }))).toEqual([]);
    expect(namesOf(rawTapRun({ times: limping(jittered(21, 2, 0.01), 0.04) }))).not.toContain('off_centre');
  });

  test('is not found below a hundredth of a half swing between the two, however sure', () => {
    const blocks = limping(evenTimes(41, 1), 0.004).map((t): [number, number] => [t, t + 0.02]);
    expect(namesOf(rawGateRun({ blocks }))).toEqual([]);
  });
});
