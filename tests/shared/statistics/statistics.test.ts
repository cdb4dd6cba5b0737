import { describe, expect, test } from 'vitest';
import { combinedUncertainty, effectiveDof } from '@shared/statistics/effectiveDof';
import { fitLine } from '@shared/statistics/fitLine';
import { invert } from '@shared/statistics/invert';
import { leastSquares } from '@shared/statistics/leastSquares';
import { slopeUncertainty } from '@shared/statistics/slopeUncertainty';
import { studentQuantile } from '@shared/statistics/studentQuantile';
import hand from '../../reference/hand-timing.json';
import norris from '../../reference/norris.json';
import uncertainty from '../../reference/uncertainty.json';
import { noise } from '../../factories/noise';

describe('studentQuantile', () => {
  const rows = Object.entries(uncertainty.t_factors).flatMap(([dof, factors]) =>
    Object.entries(factors).map(([percent, t]) => ({ dof: Number(dof), percent: Number(percent), t: Number(t) })),
  );
  test.each(rows)('t$percent($dof) is that of GUM table G.2', ({ dof, percent, t }) => {
    // The file's ten digits are good to 5e-9; the closed forms below are the sharper check.
    expect(Math.abs(studentQuantile(percent / 100, dof) / t - 1)).toBeLessThan(6e-9);
  });

  test.each([0.5, 0.9, 0.95, 0.99])(
    'agrees with the closed forms for 1, 2 and 4 degrees at %d to 1e-10',
    (coverage) => {
      const p = (1 + coverage) / 2;
      const alpha = 4 * p * (1 - p);
      const one = Math.tan(Math.PI * (p - 0.5));
      const two = 2 * (p - 0.5) * Math.sqrt(2 / alpha);
      const four = 2 * Math.sqrt(Math.cos(Math.acos(Math.sqrt(alpha)) / 3) / Math.sqrt(alpha) - 1);
      [one, two, four].forEach((t, i) => {
        expect(Math.abs(studentQuantile(coverage, [1, 2, 4][i]!) / t - 1)).toBeLessThan(1e-10);
      });
    },
  );

  test('goes over into the normal distribution', () => {
    expect(studentQuantile(0.95, Infinity)).toBeCloseTo(1.959964, 6);
  });

  test('refuses what is no coverage and no degrees of freedom', () => {
    expect(() => studentQuantile(1, 5)).toThrow(/coverage is 1/);
    expect(() => studentQuantile(0.95, 0)).toThrow(/dof is 0/);
  });
});

test('effectiveDof and combinedUncertainty give the example of GUM G.4.1', () => {
  const [a, b, c] = uncertainty.G4_example.rel_u_percent as [number, number, number];
  const shares = [
    { u: a, dof: 9 },
    { u: b, dof: 4 },
    { u: c, dof: 14 },
  ];
  expect(combinedUncertainty(shares)).toBeCloseTo(Number(uncertainty.G4_example.u_c_percent), 7);
  expect(effectiveDof(shares)).toBeCloseTo(Number(uncertainty.G4_example.nu_eff), 6);
});

test('effectiveDof is infinite when no share has fewer', () => {
  expect(effectiveDof([{ u: 1, dof: null }])).toBeNull();
});

describe('fitLine', () => {
  test('reads each point a fixed number of times, however many there are', () => {
    const reads = (n: number) => {
      let count = 0;
      const x = new Proxy(
        Array.from({ length: n }, (_, i) => i),
        { get: (target, key) => ((count += 1), Reflect.get(target, key)) },
      );
      fitLine(x, [...x]);
      return count;
    };
    expect(reads(2_000) / reads(1_000)).toBeLessThan(2.1);
  });

  test('gives the certified values of NIST StRD Norris', () => {
    const line = fitLine(norris.x, norris.y)!;
    expect(line.slope).toBeCloseTo(norris.certified.slope, 12);
    expect(line.intercept).toBeCloseTo(norris.certified.intercept, 11);
    const squares = line.residuals.reduce((sum, r) => sum + r * r, 0);
    expect(Math.sqrt(squares / 34)).toBeCloseTo(norris.certified.residual_sd, 11);
    expect(Math.sqrt(squares / 34) * Math.hypot(...line.slopeWeights)).toBeCloseTo(norris.certified.slope_sd, 13);
  });

  test('gives the thermometer calibration of GUM H.3', () => {
    const { t, b, t0, recomputed } = uncertainty.H3;
    const line = fitLine(
      t.map((v) => Number(v) - t0),
      b.map(Number),
    )!;
    expect(line.intercept).toBeCloseTo(Number(recomputed.y1), 13);
    expect(line.slope).toBeCloseTo(Number(recomputed.y2), 14);
    const found = Math.hypot(...line.residuals) / 3;
    expect(found).toBeCloseTo(Number(recomputed.s), 14);
    expect(found * Math.hypot(...line.slopeWeights)).toBeCloseTo(Number(recomputed.s_y2), 14);
  });

  test.each(hand.table)('$n_intervals swings give the slope the variance of the closed form', (row) => {
    // sd(T) = σ √(12/(n(n+1)(n+2))) for independent jitter.
    const x = Array.from({ length: row.n_intervals + 1 }, (_, i) => i);
    expect(Math.hypot(...fitLine(x, x)!.slopeWeights)).toBeCloseTo(Number(row.sd_ols_over_sigma), 12);
  });

  test('points of two kinds share the slope and keep their distance', () => {
    const x = [0, 1, 2, 3, 4, 5];
    const isOdd = x.map((v) => v % 2 === 1);
    const line = fitLine(
      x,
      x.map((v, i) => 3 + 2 * v + (isOdd[i] ? 0.25 : 0)),
      isOdd,
    )!;
    expect(line.slope).toBeCloseTo(2, 12);
    expect(line.offset).toBeCloseTo(0.25, 12);
    expect(line.intercept).toBeCloseTo(3, 12);
  });

  test('is undefined when all points stand at one x', () => {
    expect(fitLine([2, 2, 2], [1, 2, 3])).toBeUndefined();
    expect(fitLine([], [])).toBeUndefined();
  });
});

describe('slopeUncertainty', () => {
  /** Share of noisy lines whose 95 % interval holds the true slope. */
  function coverage(points: number, correlation: number, seed: number): number {
    const { normal } = noise(seed);
    const x = Array.from({ length: points }, (_, i) => i);
    let held = 0;
    for (let i = 0; i < 1500; i += 1) {
      let last = normal();
      const y = x.map(() => {
        const now = last;
        last = correlation * last + Math.sqrt(1 - correlation ** 2) * normal();
        return now;
      });
      const line = fitLine(x, y)!;
      const { u, dof } = slopeUncertainty(line)!;
      if (Math.abs(line.slope) <= studentQuantile(0.95, dof) * u) held += 1;
    }
    return held / 1500;
  }

  test.each([
    { points: 8, correlation: 0 },
    { points: 21, correlation: 0 },
    { points: 41, correlation: 0 },
    { points: 11, correlation: 0.3 },
    { points: 21, correlation: 0.3 },
    { points: 41, correlation: 0.6 },
  ])('95 % intervals hold the slope 93 to 98.5 times in 100: $points points, correlation $correlation', (row) => {
    const share = coverage(row.points, row.correlation, 7);
    expect(share).toBeGreaterThanOrEqual(0.93);
    expect(share).toBeLessThanOrEqual(0.985);
  });

  test('with strong correlation and few points it still holds nine times in ten', () => {
    expect(coverage(21, 0.6, 8)).toBeGreaterThanOrEqual(0.91);
    expect(coverage(11, 0.6, 9)).toBeGreaterThanOrEqual(0.89);
  });

  test('negative correlation makes nothing better than independent points', () => {
    const x = Array.from({ length: 20 }, (_, i) => i);
    const line = fitLine(
      x,
      x.map((v, i) => v + (i % 2 === 0 ? 1 : -1)),
    )!;
    const { u, jitter, lag1 } = slopeUncertainty(line)!;
    expect(lag1).toBeLessThan(-0.9);
    expect(u).toBeCloseTo(jitter * Math.hypot(...line.slopeWeights), 12);
  });

  test('is undefined when the points only just fix the line', () => {
    expect(slopeUncertainty(fitLine([0, 1], [0, 2])!)).toBeUndefined();
  });
});

describe('leastSquares', () => {
  // NIST StRD Misra1a: y = b1 (1 − exp(−b2 x)), certified b1 = 238.94212918, b2 = 5.5015643181e-4 (from memory of the certificate).
  const x = [77.6, 114.9, 141.1, 190.8, 239.9, 289, 332.8, 378.4, 434.8, 477.3, 536.8, 593.1, 689.1, 760];
  const y = [10.07, 14.73, 17.94, 23.93, 29.61, 35.18, 40.02, 44.82, 50.76, 55.05, 61.01, 66.4, 75.47, 81.78];

  test('gives the certified values of NIST StRD Misra1a from its second start', () => {
    const fit = leastSquares(
      ([b1, b2]) => x.map((v, i) => b1! * (1 - Math.exp((-b2! / 1e4) * v)) - y[i]!),
      [250, 5],
      (unknowns) => unknowns,
    )!;
    expect(fit.unknowns[0]! / 238.94212918).toBeCloseTo(1, 6);
    expect(fit.unknowns[1]! / 5.5015643181).toBeCloseTo(1, 6);
    expect(fit.chiSquare / 0.12455138894).toBeCloseTo(1, 6);
    // Standard deviation of b1 on the certificate: 2.7070075241.
    expect(Math.sqrt((fit.covariance[0]![0]! * fit.chiSquare) / 12) / 2.7070075241).toBeCloseTo(1, 4);
  });

  test('is undefined when an unknown does not matter', () => {
    expect(
      leastSquares(
        ([a]) => [a! - 1, a! + 1],
        [0, 5],
        (unknowns) => unknowns,
      ),
    ).toBeUndefined();
  });
});

test('invert gives the inverse and refuses a singular matrix', () => {
  expect(
    invert([
      [4, 2],
      [2, 3],
    ])!.flat(),
  ).toEqual([0.375, -0.25, -0.25, 0.5].map((v) => expect.closeTo(v, 12)));
  expect(
    invert([
      [1, 2],
      [2, 4],
    ]),
  ).toBeUndefined();
});
