import { describe, expect, test } from 'vitest';
import { decayConstants, decrementFrom } from '@shared/analysis/decayConstants';
import { forecast, viscousGuess } from '@shared/analysis/forecast';
import { lawFromReadings, preferredLaw, type DampingFound } from '@shared/analysis/preferredLaw';
import { periodRatio } from '@shared/physics/periodRatio';
import { radians } from '@shared/units/angle';
import damped from '../../reference/damped.json';
import { noise } from '../../factories/noise';

const NONE = { viscous: 0, quadratic: 0, dry: 0 };

describe('decayConstants', () => {
  test('viscous, small: δ = 2πζ, Q = 1/2ζ, half after ln 2/δ swings', () => {
    const found = decayConstants({ ...NONE, viscous: 0.005 }, 0.01, 2);
    expect(found.logarithmicDecrement / (2 * Math.PI * 0.005)).toBeCloseTo(1, 4);
    expect(found.qualityFactor).toBeCloseTo(100, 2);
    expect(found.halfLifeSwings!).toBeCloseTo(Math.LN2 / (2 * Math.PI * 0.005), 3);
    expect(found.viscousRate).toBeCloseTo(0.005 * Math.PI, 12);
  });

  test('quadratic, small: the loss goes with the square, so half is left after 1/(loss a swing) swings', () => {
    // A = A₀/(1 + (4/3π) β A₀ t): half at t = 3π/(4 β A₀).
    const found = decayConstants({ ...NONE, quadratic: 0.02 }, 0.05, 2);
    expect(found.halfLifeSwings! * 2 * Math.PI).toBeCloseTo((3 * Math.PI) / (4 * 0.02 * 0.05), 0);
    const half = decayConstants({ ...NONE, quadratic: 0.02 }, 0.025, 2);
    expect(half.qualityFactor / found.qualityFactor).toBeCloseTo(2, 3);
  });

  test('without damping Q is infinite and half is never left', () => {
    expect(decayConstants(NONE, 0.1, 2)).toMatchObject({ qualityFactor: Infinity, halfLifeSwings: null });
  });
});

test('decrementFrom: 20° to 10° in 20 swings is ln 2/20, and Q = π/δ', () => {
  const { logarithmicDecrement, qualityFactor } = decrementFrom({ value: 20, u: 1 }, { value: 10, u: 1 }, 20)!;
  expect(logarithmicDecrement.value).toBeCloseTo(Math.LN2 / 20, 12);
  expect(logarithmicDecrement.u).toBeCloseTo(Math.hypot(0.05, 0.1) / 20, 12);
  expect(qualityFactor.value).toBeCloseTo((20 * Math.PI) / Math.LN2, 10);
  expect(qualityFactor.u / qualityFactor.value).toBeCloseTo(Math.hypot(0.05, 0.1) / Math.LN2, 10);
  expect(decrementFrom({ value: 10, u: 1 }, { value: 10, u: 1 }, 20)).toBeUndefined();
});

describe('preferredLaw', () => {
  const at = (value: number) => ({ value, u: value / 10 });
  const found = (parts: Partial<DampingFound> = {}): DampingFound => ({
    gamma_per_s: at(0),
    beta: at(0.02),
    c: at(0.002),
    chances: { viscous: 0.1, quadratic: 0.9, dry: 0.9 },
    law: 'mixed',
    ...parts,
  });

  test('is the one that acts alone', () => {
    const terms = {
      gamma_per_s: at(0.01),
      beta: at(0),
      c: at(0),
      law: 'viscous',
      chances: { viscous: 1, quadratic: 0.1, dry: 0.1 },
    } as const;
    const verdict = preferredLaw(terms, 2, 0.1);
    expect(verdict).toMatchObject({ law: 'viscous', why: 'alone' });
    // A = A₀ e^(−γt): a swing of 2 s takes 2 % of 0.1 rad.
    expect(verdict.shares[0]).toMatchObject({ law: 'viscous', share: 1, chance: 1 });
    expect(verdict.shares[0]!.lossPerSwing).toBeCloseTo(0.002, 5);
  });

  test('of several is the one that takes most there: drag when the swing is large, dry friction when it is small', () => {
    expect(preferredLaw(found(), 2, radians(60))).toMatchObject({ law: 'quadratic', why: 'largest' });
    expect(preferredLaw(found(), 2, radians(5))).toMatchObject({ law: 'dry', why: 'largest' });
  });

  test('is none where the run does not tell', () => {
    expect(preferredLaw(found({ law: 'not_known' }), 2, 0.3)).toMatchObject({ law: null, why: 'not_known' });
  });
});

describe('lawFromReadings', () => {
  /** Small-angle closed forms of each law (Squire, from memory), ω = 1, one reading every four swings. */
  const CLOSED = {
    viscous: (n: number) => 0.087 * Math.exp(-0.004 * 2 * Math.PI * n),
    quadratic: (n: number) => 0.087 / (1 + (4 / (3 * Math.PI)) * 0.1 * 0.087 * 2 * Math.PI * n),
    dry: (n: number) => 0.087 - (2 / Math.PI) * 2e-4 * 2 * Math.PI * n,
  };
  const readingsOf = (law: keyof typeof CLOSED, u: number, seed: number) => {
    const { normal } = noise(seed);
    return Array.from({ length: 16 }, (_, i) => ({ swing: 4 * i, amplitude: CLOSED[law](4 * i) + u * normal(), u }));
  };

  test.each([
    ['viscous', 0.004],
    ['quadratic', 0.1],
    ['dry', 2e-4],
  ] as const)('finds the %s law and its constant %d from small swings', (law, constant) => {
    const found = lawFromReadings(readingsOf(law, radians(0.05), 3))!;
    expect(found).toMatchObject({ law, why: 'best' });
    const fit = found.fits[0]!;
    expect(Math.abs(fit.constant.value - constant)).toBeLessThan(3 * fit.constant.u + 0.005 * constant);
  });

  test('does not pretend to tell laws apart from readings good to a degree', () => {
    expect(lawFromReadings(readingsOf('viscous', radians(2), 5))).toMatchObject({ law: null, why: 'not_told_apart' });
  });

  test('needs three swings and a loss', () => {
    const at = (swing: number, amplitude: number) => ({ swing, amplitude, u: 0.01 });
    expect(lawFromReadings([at(0, 0.3), at(10, 0.2)])).toBeUndefined();
    expect(lawFromReadings([at(0, 0.2), at(10, 0.25), at(20, 0.3)])).toBeUndefined();
  });
});

describe('forecast', () => {
  test('without damping every pass comes half a period after the other', () => {
    const { passes, duration, endedBy } = forecast({ smallPeriod: 2, amplitude: 0.5, damping: NONE, swings: 10 });
    expect(passes).toHaveLength(21);
    expect(duration).toBeCloseTo(20 * periodRatio(0.5), 10);
    expect(endedBy).toBe('swings');
  });

  test('falls like the exponential it was guessed from', () => {
    const { endAmplitude } = forecast({ smallPeriod: 2, amplitude: 0.05, damping: viscousGuess(0.6, 30), swings: 30 });
    expect(endAmplitude / 0.05).toBeCloseTo(0.6, 3);
  });

  test('20° to 12° over 30 swings lengthens T by the mean square of an exponential decay, 0.48 %', () => {
    // (A₁² − A₂²)/(2 ln(A₁/A₂))/16 and 11/3072 (A₁⁴ − A₂⁴)/(4 ln(A₁/A₂)) = 0.4793 %; the start alone would say 0.767 %.
    const run = forecast({ smallPeriod: 2, amplitude: radians(20), damping: viscousGuess(0.6, 30), swings: 30 });
    const [a, b, log] = [radians(20), run.endAmplitude, Math.log(radians(20) / run.endAmplitude)];
    const wanted = (a ** 2 - b ** 2) / (2 * log) / 16 + ((11 / 3072) * (a ** 4 - b ** 4)) / (4 * log);
    expect(run.duration / 60 - 1).toBeCloseTo(wanted, 5);
    expect(wanted).toBeCloseTo(0.0048, 4);
  });

  test('ends at the amplitude asked for, or at rest', () => {
    const damping = viscousGuess(0.5, 10);
    const until = forecast({ smallPeriod: 2, amplitude: 0.2, damping, until: 0.1 });
    expect(until.endedBy).toBe('amplitude');
    expect(until.swings).toBeGreaterThanOrEqual(9.5);
    expect(until.swings).toBeLessThanOrEqual(10);
    expect(forecast({ smallPeriod: 2, amplitude: 0.2, damping: { ...NONE, dry: 0.002 } }).endedBy).toBe('rest');
  });

  test('turning points of integrated runs come when it says, and as far out', () => {
    // damped.json: Taylor series of order 46, 25 digits, ω = 1. The averaged law leaves what changes within a swing.
    const runs = damped.runs.filter((one) => Number(one.amplitude_deg) <= 90);
    expect(runs.length).toBeGreaterThan(8);
    for (const run of runs) {
      const damping = { viscous: Number(run.gamma), quadratic: Number(run.beta), dry: Number(run.c) };
      const swings = Math.floor((run.turning_times.length - 1) / 2);
      const amplitude = radians(Number(run.amplitude_deg));
      const { duration, endAmplitude } = forecast({ smallPeriod: 2 * Math.PI, amplitude, damping, swings });
      const late = (duration - Number(run.turning_times[2 * swings])) / (2 * Math.PI);
      // Up to a loss of 3 % a swing; the heaviest damping there, ζ = 0.02 at 45° and β = 0.02 at 90°, loses 12 %.
      const isHeavy =
        damping.viscous >= 0.02 || (damping.quadratic >= 0.02 && amplitude > 1) || damping.quadratic >= 0.2;
      expect(Math.abs(late)).toBeLessThan(isHeavy ? 2e-3 : 4e-5);
      const out = endAmplitude / radians(Number(run.turning_amplitudes_deg[2 * swings])) - 1;
      expect(Math.abs(out)).toBeLessThan(isHeavy ? 6e-5 : 1e-6);
    }
  });
});
