import { exp, log } from '../physics/elementary';

export interface Truncated {
  mean: number;
  variance: number;
  /** Natural logarithm of the share that was not negative. */
  logShare: number;
}

/**
 * Mean and variance of a normal variable that cannot be negative.
 *
 * @param mean      before it is known that it cannot be negative
 * @param variance  the same, > 0
 * @example truncatedNormal(0, 1) // { mean: 0.7979, variance: 0.3634, logShare: -0.6931 }, the half-normal distribution
 * @see Johnson, Kotz & Balakrishnan, Continuous Univariate Distributions 1, 13.10.1 (from memory)
 */
export function truncatedNormal(mean: number, variance: number): Truncated {
  const s = Math.sqrt(variance);
  const x = mean / s;
  // Far below zero only a thin tail is left: an exponential with these moments.
  if (x < FAR) {
    const scale = s / -x;
    return { mean: scale, variance: scale * scale, logShare: -(x * x) / 2 - log(-x) - LOG_ROOT_TWO_PI };
  }
  const hazard = hazardOfNormal(-x);
  return {
    mean: mean + s * hazard,
    variance: variance * Math.max(1 - hazard * (x + hazard), 1e-6),
    logShare: hazard === 0 ? 0 : -(x * x) / 2 - LOG_ROOT_TWO_PI - log(hazard),
  };
}

const FAR = -30;
const LOG_ROOT_TWO_PI = 0.9189385332046727;

/** φ(x)/(1 − Φ(x)). */
function hazardOfNormal(x: number): number {
  if (x > 2.5) {
    // Laplace's continued fraction.
    let rest = x;
    for (let k = 60; k > 0; k -= 1) rest = x + k / rest;
    return rest;
  }
  if (x < -9) return 0;
  const density = exp((-x * x) / 2) / Math.sqrt(2 * Math.PI);
  // Φ(x) − ½ = φ(x)(x + x³/3 + x⁵/15 + …)
  let term = x;
  let sum = x;
  for (let k = 3; Math.abs(term) > 1e-17 * Math.abs(sum) && k < 400; k += 2) {
    term *= (x * x) / k;
    sum += term;
  }
  return density / (0.5 - density * sum);
}
