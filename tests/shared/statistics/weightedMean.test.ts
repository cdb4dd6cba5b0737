import { describe, expect, test } from 'vitest';
import { chiSquareTail } from '@shared/statistics/chiSquare';
import { weightedMean } from '@shared/statistics/weightedMean';
import { combinedUncertainty, effectiveDof } from '@shared/statistics/effectiveDof';
import { fitLine } from '@shared/statistics/fitLine';
import { studentQuantile } from '@shared/statistics/studentQuantile';
import uncertainty from '../../reference/uncertainty.json';

describe('chiSquareTail', () => {
  // 5 % and 1 % points of the usual table (e.g. NIST/SEMATECH e-Handbook 1.3.6.7.4; from memory).
  test.each([
    [1, 3.841, 0.05],
    [2, 5.991, 0.05],
    [5, 11.07, 0.05],
    [10, 18.307, 0.05],
    [30, 43.773, 0.05],
    [100, 124.342, 0.05],
    [4, 13.277, 0.01],
  ])('%i degrees: %d is exceeded with probability %d', (dof, chiSquare, p) => {
    expect(chiSquareTail(chiSquare, dof) / p).toBeCloseTo(1, 3);
  });

  test('has the closed forms e^(−x/2) and e^(−x/2)(1 + x/2) for 2 and 4 degrees', () => {
    for (const x of [0.01, 0.5, 3, 12, 80]) {
      expect(chiSquareTail(x, 2) / Math.exp(-x / 2)).toBeCloseTo(1, 12);
      expect(chiSquareTail(x, 4) / (Math.exp(-x / 2) * (1 + x / 2))).toBeCloseTo(1, 12);
    }
    expect(chiSquareTail(0, 3)).toBe(1);
  });
});

describe('weightedMean', () => {
  test('weighs by 1/u²', () => {
    const mean = weightedMean([
      { value: 1, u: 0.1 },
      { value: 2, u: 0.2 },
    ])!;
    expect(mean.value).toBeCloseTo(1.2, 12);
    expect(mean.u).toBeCloseTo(125 ** -0.5, 12);
    // χ² = 0.2²/0.1² + 0.8²/0.2² = 20, so R_B = √20.
    expect(mean.birgeRatio).toBeCloseTo(Math.sqrt(20), 12);
    expect(mean.inflatedU).toBeCloseTo(Math.sqrt(20 / 125), 12);
    expect(mean.isConsistent).toBe(false);
  });

  test('does not shrink the uncertainty of values that agree better than they should', () => {
    const mean = weightedMean([9.81, 9.811, 9.809].map((value) => ({ value, u: 0.02 })))!;
    expect(mean.birgeRatio).toBeLessThan(0.1);
    expect(mean.inflatedU).toBe(mean.u);
    expect(mean.isConsistent).toBe(true);
  });

  test('of one value is that value; of none it is not known', () => {
    expect(weightedMean([{ value: 3, u: 1 }])).toMatchObject({ value: 3, u: 1, inflatedU: 1, isConsistent: true });
    expect(weightedMean([])).toBeUndefined();
    expect(() => weightedMean([{ value: 1, u: 0 }])).toThrow(/an uncertainty is 0/);
  });
});

describe('worked examples of the GUM', () => {
  test('H.1, end gauge: u_c = 32 nm, ν_eff = 16, U₉₉ = 93 nm', () => {
    const { l_s, d0, d1, d2, delta_alpha, delta_theta, alpha_s, theta_bar } = uncertainty.H1.inputs;
    const shares = [
      { u: l_s.u, dof: l_s.nu },
      // The comparison's three parts are one input with its own effective degrees of freedom, 25.6.
      {
        u: combinedUncertainty([d0, d1, d2].map(({ u }) => ({ u, dof: null }))),
        dof: effectiveDof([d0, d1, d2].map(({ u, nu }) => ({ u, dof: nu }))),
      },
      { u: (l_s.value_nm * Math.abs(theta_bar.value) * delta_alpha.halfwidth) / Math.sqrt(3), dof: delta_alpha.nu },
      { u: (l_s.value_nm * alpha_s.value * delta_theta.halfwidth) / Math.sqrt(3), dof: delta_theta.nu },
    ];
    const u = combinedUncertainty(shares);
    expect(Math.round(u)).toBe(uncertainty.H1.u_c_nm);
    const dof = Math.floor(effectiveDof(shares)!);
    expect(dof).toBe(16);
    expect(studentQuantile(0.99, dof)).toBeCloseTo(2.92, 2);
    expect(Math.round(studentQuantile(0.99, dof) * Math.round(u))).toBe(93);
  });

  test('H.3, thermometer: the correction at 30 °C and its uncertainty', () => {
    const { t, b, t0, recomputed } = uncertainty.H3;
    // With the line's own origin at 30 °C the intercept is b(30), and its uncertainty follows from the slope's weights.
    const x = t.map((v) => Number(v) - 30);
    const line = fitLine(x, b.map(Number))!;
    const s = Math.hypot(...line.residuals) / 3;
    const mean = x.reduce((sum, v) => sum + v, 0) / x.length;
    const uSlope = s * Math.hypot(...line.slopeWeights);
    expect(line.intercept).toBeCloseTo(Number(recomputed.b30), 12);
    expect(Math.hypot(s / Math.sqrt(x.length), mean * uSlope)).toBeCloseTo(Number(recomputed.u_b30), 12);
    // Published: b(30) = −0.1494 °C, u = 0.0041 °C; origin at 20 °C.
    expect(t0).toBe(20);
  });
});
