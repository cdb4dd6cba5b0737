import { expect, test } from 'vitest';
import { decayReport } from '@shared/analysis/decayReport';
import { analysisOf } from '../../factories/analysis';
import { angleReading } from '../../factories/rawRuns';

const period = { value: 2, u: 0.001, dof: 19, coverage_factor: 2.09, expanded_u: 0.0021 };
const deg = (value: number) => ({ value, u: 0.1 });
const faded = analysisOf(new Array<number>(21).fill(0), {
  small_period_s: period,
  amplitude: { ratio: 1.0005, start_deg: deg(6), end_deg: deg(3), decay_known: true },
});
/** γ of an amplitude that halves in 20 swings of 2 s. */
const gamma = Math.LN2 / 40;
const measured = (value: number) => ({ value, u: value / 20 });
const motion = {
  event: 'pass' as const,
  path: 'integrated' as const,
  converged: true,
  release_swing: 0,
  release_s: 0,
  release_deg: deg(6),
  gamma_per_s: measured(gamma),
  beta: measured(0),
  c: measured(0),
  chances: { viscous: 0.98, quadratic: 0.1, dry: 0.1 },
  law: 'viscous' as const,
  gate_angle_deg: null,
};

test('half the amplitude in 20 swings: δ = ln 2/20, Q = 20π/ln 2, half-life 20', () => {
  const report = decayReport({ ...faded, motion }, { amplitudes: [] })!;
  expect(report.decrement.value).toBeCloseTo(Math.LN2 / 20, 12);
  expect(report.qualityFactor.value).toBeCloseTo((20 * Math.PI) / Math.LN2, 9);
  expect(report.halfLifeSwings!).toBeCloseTo(20, 1);
  expect(report.byMotion).toMatchObject({ law: 'viscous', why: 'alone' });
});

test('without a motion the readings speak, if there are three', () => {
  const readings = [0, 10, 20].map((swing) => angleReading(swing, 6 * Math.exp((-Math.LN2 * swing) / 20), 0.02));
  const report = decayReport(faded, { amplitudes: readings })!;
  expect(report.byMotion).toBeNull();
  expect(report.byReadings).toMatchObject({ law: 'viscous', why: 'best' });
  expect(report.halfLifeSwings!).toBeCloseTo(20, 1);
  expect(decayReport(faded, { amplitudes: readings.slice(0, 2) })!.byReadings).toBeNull();
});

test('with one amplitude, or none lost, there is nothing to report', () => {
  const { amplitude } = faded;
  expect(decayReport({ ...faded, amplitude: { ...amplitude!, decay_known: false } }, { amplitudes: [] })).toBe(
    undefined,
  );
  expect(decayReport({ ...faded, amplitude: { ...amplitude!, end_deg: deg(6) } }, { amplitudes: [] })).toBe(undefined);
  expect(decayReport(analysisOf([0, 0]), { amplitudes: [] })).toBe(undefined);
});
