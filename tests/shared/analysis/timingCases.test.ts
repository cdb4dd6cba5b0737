import { describe, expect, test } from 'vitest';
import { analyseRun } from '@shared/analysis/analyseRun';
import { lineMethod } from '@shared/analysis/lineMethod';
import { findMotion } from '@shared/analysis/motionMethod';
import { stateResult } from '@shared/analysis/stateResult';
import type { EditChange } from '@shared/schemas/edit';
import { foldRun } from '@shared/timing/foldRun';
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

const faultsMended: Record<string, EditChange[]> = {
  'missed-two': [
    { kind: 'insert_gap', before_mark: 7, count: 1 },
    { kind: 'leave_out_mark', mark: 12 },
    { kind: 'insert_gap', before_mark: 16, count: 1 },
  ],
  'keyed-miscount': [{ kind: 'set_swings', swings: 19 }],
};

describe('motion-2', () => {
  test.each([
    { id: 'simple-5', within: 0.002 },
    { id: 'simple-30', within: 0.002 },
    { id: 'simple-60-pass', within: 0.004 },
    { id: 'rod-90', within: 0.003 },
    { id: 'rod-140-clean', within: 0.0001 },
    { id: 'rod-165-clean', within: 0.0001 },
    { id: 'dry-40', within: 0.002 },
    { id: 'every-5th', within: 0.001 },
    { id: 'keyed-20', within: 0.004 },
    { id: 'keyed-miscount', within: 0.004 },
    { id: 'missed-two', within: 0.0015 },
    { id: 'gate-45', within: 0.0005 },
    { id: 'gate-off', within: 0.0001 },
    { id: 'gate-chatter', within: 0.0005 },
  ])('finds T0 of $id within three of its u, and u is not idle: below $within of T0', ({ id, within }) => {
    const { off, u, smallPeriod, analysis } = analysed(id, ...(faultsMended[id] ?? []));
    expect(off).toBeLessThanOrEqual(3 * u);
    expect(u).toBeLessThan(within * smallPeriod);
    expect(analysis.motion!.converged).toBe(true);
  });

  test.each(['rod-140-clean', 'rod-165-clean'])('lands on T0 of %s to a millionth', (id) => {
    const { off, smallPeriod } = analysed(id);
    expect(off).toBeLessThan(1e-6 * smallPeriod);
  });

  test.each(['gate-45', 'gate-off', 'gate-chatter'])('finds T0 of %s from block times to 2e-4', (id) => {
    const { off, smallPeriod } = analysed(id);
    expect(off).toBeLessThan(2e-4 * smallPeriod);
  });

  test('tells turning points from passes, and quadratic drag from the others, where the run shows it', () => {
    const rod = analysed('rod-140-clean').analysis.motion!;
    expect(rod).toMatchObject({ event: 'turn', law: 'quadratic' });
    expect(rod.beta.value).toBeCloseTo(0.06, 4);
    expect(analysed('rod-165-clean').analysis.motion!.law).toBe('quadratic');
  });

  test('takes the amplitude from the flag’s speed, and where the gate stands from its limp', () => {
    expect(analysed('gate-45').analysis.amplitude!.start_deg.value).toBeCloseTo(45, 0);
    const { amplitude, motion } = analysed('gate-off').analysis;
    expect(amplitude!.start_deg.value).toBeCloseTo(25, 1);
    expect(Math.abs(motion!.gate_angle_deg!.value)).toBeCloseTo(3, 1);
  });

  // The clean runs stay out: there the averaged law is a fifth of the amplitude from the motion.
  test.each(['simple-5', 'simple-30', 'every-5th', 'keyed-20'])(
    'the averaged law alone gives T0 of %s to a tenth of its u',
    (id) => {
      const { run } = timingCase(id);
      const view = foldRun(run, []);
      const [averaged, integrated] = (['averaged', 'integrated'] as const).map((path) => findMotion(view, path)!.fit);
      const period = (fit: typeof averaged) => fit!.values[fit!.places.period]!;
      const u = Math.sqrt(integrated!.covariance[integrated!.places.period]![integrated!.places.period]!);
      expect(averaged!.path).toBe('averaged');
      expect(integrated!.path).toBe('integrated');
      expect(Math.abs(period(averaged) - period(integrated))).toBeLessThan(0.1 * u);
    },
  );
});

describe('line-1', () => {
  test.each(['simple-5', 'simple-30', 'rod-90', 'dry-40', 'every-5th', 'keyed-20', 'gate-45', 'gate-off'])(
    'finds T0 of %s within three of its u',
    (id) => {
      const { run, smallPeriod } = timingCase(id);
      const { value, shares } = lineMethod.fit(foldRun(run, [])).smallPeriod!;
      expect(Math.abs(value - smallPeriod)).toBeLessThanOrEqual(3 * stateResult(value, shares)!.u);
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
    'keyed-20',
    'dry-40',
    'every-5th',
  ])('raises none on %s', (id) => {
    expect(flagged(id)).toEqual([]);
  });

  test('tells that the gate of gate-off stands beside the lowest point, as its truth has it by 3°, and nothing else', () => {
    expect(flagged('gate-off')).toEqual([{ code: 'off_centre', mark: null }]);
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

  test('finds both blocks that chatter broke apart, reads each as one, and leaving the pieces out changes nothing', () => {
    expect(flagged('gate-chatter')).toEqual([
      { code: 'chatter', mark: 6 },
      { code: 'chatter', mark: 12 },
    ]);
    const before = analysed('gate-chatter').analysis;
    const after = analysed(
      'gate-chatter',
      { kind: 'leave_out_mark', mark: 6 },
      { kind: 'leave_out_mark', mark: 12 },
    ).analysis;
    expect(after.small_period_s).toEqual(before.small_period_s);
    expect(after.flags.every(({ answered }) => answered)).toBe(true);
  });
});
