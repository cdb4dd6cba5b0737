import { describe, expect, test } from 'vitest';
import { analyseRun } from '@shared/analysis/analyseRun';
import type { EditChange } from '@shared/schemas/edit';
import { flagsOf, jittered, namesOf } from '../../factories/flagged';
import { rawEdits, rawTapRun, sealed } from '../../factories/rawRuns';

/** 30 laps of 2 s, held up for so long before a mark. */
const heldUp = (seconds: number, at = 12) =>
  rawTapRun({ times: jittered(31, 2, 0.03).map((t, i) => (i < at ? t : t + seconds)) });

describe('pause', () => {
  test.each([0.4, 0.8, -0.5, 1.1, 3, 5.2])(
    'is a lap longer by %d s of 2 s, after which the beat stays shifted',
    (seconds) => {
      const [flag, ...others] = flagsOf(heldUp(seconds));
      expect(others).toEqual([]);
      expect(flag).toMatchObject({ code: 'pause', mark: 12, choices: ['keep_part', 'keep_flagged'] });
      expect(flag!.seen).toMatchObject({ from_mark: 12, to_mark: 30 });
      const whole = 2 * Math.round(seconds / 2);
      expect(Math.abs(flag!.seen.shift_ms! / 1000 - (seconds - whole))).toBeLessThan(0.1);
    },
  );

  test('is none when the lap is longer by whole laps: those are missed marks', () => {
    expect(namesOf(heldUp(2))).toEqual(['missed 12']);
    expect(namesOf(heldUp(4.02))).toEqual(['missed 12']);
  });

  test('is none when a single mark is off, or the first one', () => {
    const off = (at: number) => rawTapRun({ times: jittered(31, 2, 0.03).map((t, i) => (i === at ? t + 0.4 : t)) });
    expect(namesOf(off(12))).toEqual(['outlier 12']);
    expect(namesOf(off(5))).toEqual(['outlier 5']);
    expect(namesOf(off(0))).toEqual(['late_first_mark 0']);
  });

  test('keeping the longer part answers it and gives the period back', () => {
    const run = heldUp(0.8);
    const change: EditChange = { kind: 'keep_part', from_mark: 12, to_mark: 30 };
    const analysed = (...changes: EditChange[]) =>
      analyseRun({ run: sealed(run), edits: rawEdits(run, ...changes).map(sealed) });
    const [before, after] = [analysed(), analysed(change)];
    expect(before.period_s!.value).toBeGreaterThan(2.02);
    expect(Math.abs(after.period_s!.value - 2)).toBeLessThan(3 * after.period_s!.u);
    expect(after.marks_used).toBe(19);
    expect(after.swings).toBe(18);
    expect(after.flags.map(({ code, answered }) => [code, answered])).toEqual([['pause', true]]);
  });

  test('is found with marks at every pass, of a mark off centre too', () => {
    const times = jittered(41, 1, 0.02).map((t, i) => t + (i % 2) * 0.1 + (i < 20 ? 0 : 0.35));
    expect(namesOf(rawTapRun({ times, capture: { swings_per_mark: 0.5 } }))).toEqual(['pause 20']);
  });
});
