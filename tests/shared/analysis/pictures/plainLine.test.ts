import { expect, test } from 'vitest';
import { analyseRun } from '@shared/analysis/analyseRun';
import { plainLine } from '@shared/analysis/pictures/plainLine';
import type { Analysis } from '@shared/schemas/analysis';
import { analysisOf } from '../../../factories/analysis';
import { sealed } from '../../../factories/rawRuns';
import { timingCase } from '../../../factories/timingCases';

const motion = analyseRun({ run: sealed(timingCase('simple-30').run), edits: [] }).motion;

/** Marks that lie on the motion without any scatter, at these times. */
function onMotion(times: number[]): Pick<Analysis, 'motion' | 'marks'> {
  const { marks } = analysisOf(times.map(() => 0));
  return { motion, marks: marks.map((row, i) => ({ ...row, time_s: times[i]! })) };
}

test('marks that slow evenly bow off the plain line as a parabola does', () => {
  // The line through b n² on 0 … N has slope bN and begins at −bN(N − 1)/6: closed form.
  const [b, N] = [-0.001, 20];
  const times = Array.from({ length: N + 1 }, (_, n) => 2 * n + b * n * n);
  plainLine(onMotion(times))!.forEach(({ bend, swing: n }) => {
    expect(bend).toBeCloseTo(-b * (n * n - N * n + (N * (N - 1)) / 6), 12);
  });
});

test('evenly swinging marks lie on the plain line', () => {
  for (const { bend } of plainLine(onMotion([0, 2, 4, 6, 8]))!) expect(bend).toBeCloseTo(0, 12);
});

test('passes off centre both ways are no bow', () => {
  const times = Array.from({ length: 21 }, (_, i) => i + (i % 2) * 0.1);
  const run = onMotion(times);
  run.marks.forEach((row) => (row.swing = row.swing! / 2));
  for (const { bend } of plainLine(run)!) expect(bend).toBeCloseTo(0, 12);
});

test('a fall from 60° to 34° in 15 swings bows the line by more than the jitter of the hand', () => {
  const analysis = analyseRun({ run: sealed(timingCase('simple-60-pass').run), edits: [] });
  const bends = plainLine(analysis)!.map(({ bend }) => Math.abs(bend));
  expect(Math.max(...bends)).toBeGreaterThan(2 * analysis.jitter_s!);
});

test('a mark left out is no point, and without a motion there is no bow to draw', () => {
  const { marks } = analysisOf([0, null, 0, 0]);
  marks.filter(({ swing }) => swing !== null).forEach((row, i) => (row.swing = i));
  expect(plainLine({ motion, marks })).toHaveLength(3);
  expect(plainLine({ motion: null, marks })).toBeUndefined();
});
