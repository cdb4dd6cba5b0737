import { describe, expect, test } from 'vitest';
import { averagedAt, averagedMotion, slopes } from '@shared/physics/motion/averagedMotion';
import { releaseMotion } from '@shared/physics/motion/motion';
import { radians } from '@shared/units/angle';
import damped from '../../../reference/damped.json';
import decay from '../../../reference/decay.json';

/** Cycle averages by quadrature with 60 digits, made outside this project: tests/reference/decay.json. */
test.each(decay.decay_rate_functions.table)('loses amplitude at $theta0_deg° as the quadrature says', (row) => {
  const amplitude = radians(Number(row.theta0_deg));
  const rate = (damping: Parameters<typeof slopes>[1]) => {
    const [lost, time] = slopes(amplitude, damping);
    return -lost / time;
  };
  expect(rate({ viscous: 1, quadratic: 0, dry: 0 }) / Number(row.rate_viscous)).toBeCloseTo(1, 10);
  expect(rate({ viscous: 0, quadratic: 1, dry: 0 }) / Number(row.rate_quadratic)).toBeCloseTo(1, 10);
  expect(rate({ viscous: 0, quadratic: 0, dry: 1 }) / Number(row.rate_coulomb)).toBeCloseTo(1, 10);
});

/** What averaging is known to leave at a loss of 3 % a swing: stated with the reference runs. */
describe('against the integrated motion, after 39 swings at γ = 0.005', () => {
  test.each([
    { angle: 45, within: 2e-6 },
    { angle: 90, within: 1.1e-5 },
    { angle: 150, within: 2e-4 },
    { angle: 170, within: 1.7e-3 },
  ])('the amplitude from $angle° is right to $within', ({ angle, within }) => {
    const damping = { viscous: 0.005, quadratic: 0, dry: 0 };
    const { turns } = releaseMotion(radians(angle), damping, 78);
    const { amplitude } = averagedAt(averagedMotion(radians(angle), damping, 39), 39);
    expect(Math.abs(amplitude / turns[78]!.amplitude - 1)).toBeLessThan(within);
  });
});

test.each(damped.runs.filter((run) => Number(run.amplitude_deg) <= 45).map((run) => ({ ...run, loss: lossOf(run) })))(
  'turning points of the reference run $amplitude_deg° $kind come out to a small part of the loss',
  (run) => {
    const damping = { viscous: Number(run.gamma), quadratic: Number(run.beta), dry: Number(run.c) };
    const table = averagedMotion(radians(Number(run.amplitude_deg)), damping, 20);
    run.turning_amplitudes_deg.forEach((amplitude, i) => {
      const found = averagedAt(table, i / 2).amplitude;
      expect(Math.abs(found / radians(Number(amplitude)) - 1)).toBeLessThan(1e-9 + 0.04 * run.loss ** 2);
    });
  },
);

/** Share of the amplitude that goes in the first half swing of a reference run. */
function lossOf(run: (typeof damped.runs)[number]): number {
  return 1 - Number(run.turning_amplitudes_deg[1]) / Number(run.turning_amplitudes_deg[0]);
}
