import { exp, log } from '../physics/elementary';
import { logGamma } from './logGamma';

/**
 * Quantile of Student's t: the factor t such that a share `coverage` of the distribution lies within ±t.
 *
 * @param coverage  in (0, 1), like 0.95
 * @param dof       degrees of freedom, > 0, need not be whole; Infinity gives the normal distribution
 * @returns         > 0, right to about 1e-10
 * @throws {RangeError} naming the argument out of range
 * @example studentQuantile(0.95, 9) // 2.2621571627
 * @see JCGM 100:2008, table G.2; the tail area is the incomplete beta function, Abramowitz & Stegun 26.7.1
 */
export function studentQuantile(coverage: number, dof: number): number {
  if (!(coverage > 0 && coverage < 1))
    throw new RangeError(`studentQuantile: coverage is ${coverage}, it must be in (0, 1)`);
  if (!(dof > 0)) throw new RangeError(`studentQuantile: dof is ${dof}, it must be above 0`);
  // From ten million degrees on the difference from the normal distribution is below 1e-6 of t.
  const nu = Math.min(dof, 1e7);
  const outside = 1 - coverage;
  // The area outside ±t is I_x(ν/2, 1/2) at x = ν/(ν + t²), so the upper end is found by halving ln t.
  let [low, high] = [-20, 60];
  for (let i = 0; i < 200 && high - low > 1e-14 * Math.max(1, Math.abs(high)); i += 1) {
    const middle = (low + high) / 2;
    if (areaOutside(exp(middle), nu) > outside) low = middle;
    else high = middle;
  }
  return exp((low + high) / 2);
}

function areaOutside(t: number, nu: number): number {
  const square = t * t;
  return incompleteBeta(nu / (nu + square), square / (nu + square), nu / 2, 0.5);
}

/** Regularised incomplete beta function I_x(a, b); y = 1 − x is passed in so that nothing cancels. */
function incompleteBeta(x: number, y: number, a: number, b: number): number {
  if (x <= 0) return 0;
  if (y <= 0) return 1;
  const front = exp(a * log(x) + b * log(y) - logBeta(a, b));
  // The fraction converges fast only on its own side of the mean.
  return x < (a + 1) / (a + b + 2) ? (front * betaFraction(x, a, b)) / a : 1 - (front * betaFraction(y, b, a)) / b;
}

/** Continued fraction, Abramowitz & Stegun 26.5.8, by Lentz's method. */
function betaFraction(x: number, a: number, b: number): number {
  const tiny = 1e-300;
  const away = (z: number) => (Math.abs(z) < tiny ? tiny : z);
  let c = 1;
  let d = 1 / away(1 - ((a + b) * x) / (a + 1));
  let fraction = d;
  for (let m = 1; m <= 10_000; m += 1) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
    d = 1 / away(1 + even * d);
    c = away(1 + even / c);
    fraction *= d * c;
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
    d = 1 / away(1 + odd * d);
    c = away(1 + odd / c);
    fraction *= d * c;
    if (Math.abs(d * c - 1) < 1e-16) break;
  }
  return fraction;
}

/** ln B(a, b). Large arguments by the difference of Stirling series, because ln Γ itself would cancel. */
function logBeta(a: number, b: number): number {
  return logGamma(a) + logGamma(b) - logGamma(a + b);
}
