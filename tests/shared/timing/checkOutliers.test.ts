import { describe, expect, it } from 'vitest';
import { analyseRun } from '@shared/analysis/analyseRun';
import { evenTimes, rawEdits, rawTapRun, sealed } from '../../factories/rawRuns';
import { noise } from '../../factories/noise';

/** 20 swings of 2 s with this scatter, and one mark off by this. */
function tapped(seed: number, jitter: number, off: Record<number, number> = {}) {
  const { normal } = noise(seed);
  return rawTapRun({
    times: evenTimes(21, 2).map((time, i) => time + (i === 0 ? 0 : jitter * normal()) + (off[i] ?? 0)),
  });
}
const open = (run: ReturnType<typeof tapped>) =>
  analyseRun({ run: sealed(run), edits: [] })
    .flags.filter((flag) => !flag.answered)
    .map(({ code, mark }) => [code, mark]);

describe('a mark far off the others', () => {
  it('is flagged by its number, late or early, and nothing else is', () => {
    expect(open(tapped(1, 0.02, { 9: 0.15 }))).toEqual([['outlier', 9]]);
    expect(open(tapped(2, 0.02, { 14: -0.2 }))).toEqual([['outlier', 14]]);
  });

  it('is gone once it is left out, and the swings keep their number', () => {
    const run = tapped(1, 0.02, { 9: 0.15 });
    const edits = rawEdits(run, { kind: 'leave_out_mark', mark: 9 }).map(sealed);
    const analysis = analyseRun({ run: sealed(run), edits });
    expect(analysis.flags.every((flag) => flag.answered)).toBe(true);
    expect(analysis.swings).toBe(20);
  });

  it('is no outlier where all marks scatter as much', () => {
    expect(open(tapped(3, 0.08, { 9: 0.15 }))).toEqual([]);
  });

  it('is called out in at most one good run in a hundred', () => {
    const runs = Array.from({ length: 400 }, (_, seed) => tapped(seed, 0.05));
    const flagged = runs.filter((run) => open(run).some(([code]) => code === 'outlier'));
    expect(flagged.length).toBeLessThanOrEqual(4);
  });
});
