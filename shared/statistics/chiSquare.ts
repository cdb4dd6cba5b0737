import { logGamma } from './logGamma';
import { exp, log } from '../physics/elementary';

/**
 * Probability that a sum of squares of `dof` standard normal numbers is larger than this.
 *
 * @param chiSquare  ≥ 0
 * @param dof        > 0
 * @returns          in [0, 1]
 * @throws {RangeError} naming the argument out of range
 * @example chiSquareTail(3.841459, 1) // 0.05
 * @see incomplete gamma function, Abramowitz & Stegun 6.5.29 (series) and 6.5.31 (continued fraction), 26.4.19
 */
export function chiSquareTail(chiSquare: number, dof: number): number {
  if (!(chiSquare >= 0)) throw new RangeError(`chiSquareTail: chiSquare is ${chiSquare}, it must be 0 or more`);
  if (!(dof > 0)) throw new RangeError(`chiSquareTail: dof is ${dof}, it must be above 0`);
  const [a, x] = [dof / 2, chiSquare / 2];
  if (x === 0) return 1;
  if (x === Infinity) return 0;
  const front = exp(a * log(x) - x - logGamma(a));
  return x < a + 1 ? 1 - front * lowerSeries(a, x) : front * upperFraction(a, x);
}

/** Σ xⁿ/(a (a+1) … (a+n)). */
function lowerSeries(a: number, x: number): number {
  let term = 1 / a;
  let sum = term;
  for (let n = 1; n < 10_000 && term > sum * 1e-17; n += 1) {
    term *= x / (a + n);
    sum += term;
  }
  return sum;
}

/** By Lentz's method. */
function upperFraction(a: number, x: number): number {
  let b = x + 1 - a;
  let c = Infinity;
  let d = 1 / b;
  let fraction = d;
  for (let n = 1; n < 10_000; n += 1) {
    const step = -n * (n - a);
    b += 2;
    d = 1 / (step * d + b);
    c = b + step / c;
    fraction *= c * d;
    if (Math.abs(c * d - 1) < 1e-16) break;
  }
  return fraction;
}
