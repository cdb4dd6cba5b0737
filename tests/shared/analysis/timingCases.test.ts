import { describe, expect, test } from 'vitest';
import { analyseRun } from '@shared/analysis/analyseRun';
import type { EditChange } from '@shared/schemas/edit';
import { rawEdits, sealed } from '../../factories/rawRuns';
import { timingCase } from '../../factories/timingCases';

/** The equation of motion integrated outside this project, with jitter added: tests/reference/timing-cases.json. */
function analysed(id: string, ...changes: EditChange[]) {
  const { run, smallPeriod } = timingCase(id);
  const analysis = analyseRun({ run: sealed(run), edits: rawEdits(run, ...changes).map(sealed) });
  const { value, u, expanded_u } = analysis.small_period_s!;
  return { analysis, off: Math.abs(value - smallPeriod), u, expanded_u, smallPeriod };
}
const flagged = (id: string) => analysed(id).analysis.flags.map(({ code, mark }) => ({ code, mark }));

describe('line-1', () => {
  test.each([
    { id: 'simple-5', within: 0.002 },
    { id: 'simple-30', within: 0.002 },
    { id: 'simple-60-pass', within: 0.008 },
    { id: 'rod-90', within: 0.004 },
    { id: 'dry-40', within: 0.002 },
    { id: 'every-5th', within: 0.001 },
    { id: 'keyed-20', within: 0.004 },
    { id: 'gate-45', within: 0.0005 },
    { id: 'gate-off', within: 0.0002 },
  ])('finds T0 of $id within three of its u, and u is not idle: below $within of T0', ({ id, within }) => {
    const { off, u, smallPeriod } = analysed(id);
    expect(off).toBeLessThanOrEqual(3 * u);
    expect(u).toBeLessThan(within * smallPeriod);
  });

  test('takes the amplitude from the flag’s speed, also 3° off the lowest point', () => {
    expect(analysed('gate-45').analysis.amplitude!.start_deg.value).toBeCloseTo(45, 0);
    // 25° at release, 24.95° a quarter of a swing later; without the gate's offset it would come out at 24.78°.
    expect(analysed('gate-off').analysis.amplitude!.start_deg.value).toBeCloseTo(24.95, 1);
  });

  // Above 90°, or with a tenth of the amplitude gone in a swing, an averaged amplitude is not the motion.
  // What is promised there is an uncertainty that knows it.
  test.each(['rod-140-clean', 'rod-165-clean'])(
    'does not pretend to know %s: clean data, and u says 2e-3 of T0 or more',
    (id) => {
      const { off, u, expanded_u, smallPeriod } = analysed(id);
      expect(off).toBeLessThanOrEqual(expanded_u);
      expect(u).toBeGreaterThan(0.002 * smallPeriod);
    },
  );
});

describe('flags', () => {
  test.each([
    'simple-5',
    'simple-30',
    'simple-60-pass',
    'rod-90',
    'rod-140-clean',
    'rod-165-clean',
    'gate-45',
    'gate-off',
    'keyed-20',
    'dry-40',
    'every-5th',
  ])('raises none on %s', (id) => {
    expect(flagged(id)).toEqual([]);
  });

  test('finds the two missed and the one struck twice, and nothing else', () => {
    expect(flagged('missed-two')).toEqual([
      { code: 'missed', mark: 7 },
      { code: 'double', mark: 12 },
      { code: 'missed', mark: 16 },
    ]);
  });

  test('until they are answered T is plainly off and its interval wide; answered, T0 is right', () => {
    const before = analysed('missed-two');
    expect(before.u).toBeGreaterThan(0.03 * before.smallPeriod);
    const after = analysed(
      'missed-two',
      { kind: 'insert_gap', before_mark: 7, count: 1 },
      { kind: 'leave_out_mark', mark: 12 },
      { kind: 'insert_gap', before_mark: 16, count: 1 },
    );
    expect(after.analysis.swings).toBe(25);
    expect(after.off).toBeLessThanOrEqual(3 * after.u);
    expect(after.u).toBeLessThan(0.0015 * after.smallPeriod);
    expect(after.analysis.flags).toHaveLength(3);
    expect(after.analysis.flags.every(({ answered }) => answered)).toBe(true);
  });

  test('finds nineteen swings written as twenty from the length, and setting them mends T0', () => {
    expect(flagged('keyed-miscount')).toEqual([{ code: 'count_from_one', mark: null }]);
    const mended = analysed('keyed-miscount', { kind: 'set_swings', swings: 19 });
    expect(mended.off).toBeLessThanOrEqual(3 * mended.u);
    expect(mended.analysis.flags.map(({ answered }) => answered)).toEqual([true]);
  });

  test('finds both blocks that chatter broke in two', () => {
    expect(flagged('gate-chatter')).toEqual([
      { code: 'double', mark: 6 },
      { code: 'double', mark: 12 },
    ]);
    const mended = analysed('gate-chatter', { kind: 'leave_out_mark', mark: 6 }, { kind: 'leave_out_mark', mark: 12 });
    expect(mended.off).toBeLessThanOrEqual(3 * mended.u);
  });
});
