import { expect, test } from 'vitest';
import { analyseRun } from '@shared/analysis/analyseRun';
import { amplitudeDecay } from '@shared/analysis/pictures/amplitudeDecay';
import type { RawRun } from '@shared/schemas/run';
import { foldRun } from '@shared/timing/foldRun';
import { degrees } from '@shared/units/angle';
import { rawTapRun, sealed } from '../../../factories/rawRuns';
import { timingCase } from '../../../factories/timingCases';
import file from '../../../reference/timing-cases.json';

const decayOf = (run: RawRun) => {
  const analysis = analyseRun({ run: sealed(run), edits: [] });
  return { analysis, ...amplitudeDecay(analysis, foldRun(run, [])) };
};
/** True amplitudes after 0, 1, 2 … swings, degrees, from the integration the case was made by. */
const truth = (id: string) => file.cases.find((one) => one.id === id)!.truth.amplitudeDegAfterSwings;

test.each(['simple-5', 'simple-30', 'simple-60-pass', 'rod-90', 'gate-45', 'gate-off', 'keyed-20', 'dry-40'])(
  'the decay curve of %s holds the true amplitudes within three standard uncertainties',
  (id) => {
    const { curve } = decayOf(timingCase(id).run);
    const known = truth(id);
    const whole = curve.filter(({ swing }) => Number.isInteger(swing) && known[swing] !== undefined);
    expect(whole.length).toBeGreaterThan(10);
    for (const { swing, amplitude, u } of whole) {
      expect(Math.abs(degrees(amplitude) - known[swing]!)).toBeLessThan(3 * degrees(u) + 0.02);
    }
  },
);

test.each(['simple-5', 'simple-30', 'simple-60-pass', 'rod-90', 'gate-off', 'dry-40', 'every-5th'])(
  'curve and band of %s begin and end where the analysis states its amplitudes',
  (id) => {
    const { curve, analysis } = decayOf(timingCase(id).run);
    const { start_deg, end_deg } = analysis.amplitude!;
    const [first, last] = [curve.find(({ swing }) => swing === 0)!, curve.at(-1)!];
    expect(last.swing).toBe(analysis.swings);
    for (const [row, stated] of [
      [first, start_deg],
      [last, end_deg],
    ] as const) {
      expect(Math.abs(degrees(row.amplitude) - stated.value)).toBeLessThan(0.02 * stated.u);
      expect(degrees(row.u) / stated.u).toBeGreaterThan(0.85);
      expect(degrees(row.u) / stated.u).toBeLessThan(1.15);
    }
  },
);

test.each(['gate-45', 'gate-off', 'gate-chatter'])('the blocks of %s tell the true amplitudes to 2 in 100', (id) => {
  const { readings } = decayOf(timingCase(id).run);
  const byBlocks = readings.filter(({ from }) => from === 'blocks');
  expect(byBlocks.length).toBeGreaterThan(4);
  const known = truth(id);
  for (const { swing, amplitude } of byBlocks) {
    const [before, after] = [known[Math.floor(swing)]!, known[Math.ceil(swing)] ?? known[Math.floor(swing)]!];
    const there = before + (swing - Math.floor(swing)) * (after - before);
    // A pass is a quarter of a swing later than the turning point it is counted from.
    expect(Math.abs(degrees(amplitude) / there - 1)).toBeLessThan(0.02);
  }
});

test('with one reading the band at the end is wider than at the start', () => {
  const { curve } = decayOf(timingCase('keyed-20').run);
  expect(curve.at(-1)!.u / curve.at(-1)!.amplitude).toBeGreaterThan(curve[0]!.u / curve[0]!.amplitude);
});

test('a long run has no more than 121 rows', () => {
  const amplitudes = timingCase('simple-30').run.amplitudes;
  const { curve } = decayOf(rawTapRun({ times: Array.from({ length: 901 }, (_, i) => 2 * i), amplitudes }));
  expect(curve.length).toBeLessThanOrEqual(121);
  expect(curve.at(-1)!.swing).toBe(900);
});

test('without a reading there is neither curve nor point', () => {
  expect(decayOf(rawTapRun())).toMatchObject({ curve: [], readings: [] });
});
