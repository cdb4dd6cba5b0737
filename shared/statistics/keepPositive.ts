import { truncatedNormal } from './truncatedNormal';

/** A normal distribution of several unknowns. */
export interface Normal {
  mean: number[];
  covariance: number[][];
}

export interface PositiveNormal extends Normal {
  /** Natural logarithm of the share of the distribution within the bounds, about. */
  logShare: number;
}

/**
 * What is known of jointly normal unknowns when none of them can be negative. Each bound is put in the place
 * of a normal measurement with the same effect on mean and variance, in turns until they settle.
 *
 * @param normal  before the bounds
 * @returns       means above 0, and less variance than before
 * @see expectation propagation: Minka (2001); Cunningham, Hennig & Lacoste-Julien, arXiv:1111.6832 (from memory)
 */
export function keepPositive({ mean, covariance }: Normal): PositiveNormal {
  const m = [...mean];
  const c = covariance.map((row) => [...row]);
  const precisions = m.map(() => 0);
  const shifts = m.map(() => 0);
  let logShare = 0;
  for (let turn = 0; turn < MOST_TURNS; turn += 1) {
    let moved = 0;
    for (let k = 0; k < m.length; k += 1) {
      const variance = c[k]![k]!;
      // Without its own bound: what all the others say.
      const precision = 1 / variance - precisions[k]!;
      const shift = m[k]! / variance - shifts[k]!;
      if (!(precision > 0) || !Number.isFinite(precision)) continue;
      const alone = truncatedNormal(shift / precision, 1 / precision);
      if (turn === 0) logShare += alone.logShare;
      moved = Math.max(moved, Math.abs(alone.mean - m[k]!) / Math.sqrt(variance));
      const by = Math.max(1 / alone.variance - precision, 0) - precisions[k]!;
      const pull = alone.mean / alone.variance - shift - shifts[k]!;
      measure(m, c, k, by, pull);
      precisions[k]! += by;
      shifts[k]! += pull;
    }
    if (moved < SETTLED) break;
  }
  return { mean: m, covariance: c, logShare };
}

/** Adds a measurement of unknown k to mean and covariance, in place: `by` is its precision, `pull` that times its value. */
function measure(m: number[], c: number[][], k: number, by: number, pull: number): void {
  const weight = 1 + by * c[k]![k]!;
  const step = (pull - by * m[k]!) / weight;
  const column = c.map((row) => row[k]!);
  for (let i = 0; i < m.length; i += 1) {
    m[i]! += column[i]! * step;
    for (let j = 0; j < m.length; j += 1) c[i]![j]! -= (column[i]! * column[j]! * by) / weight;
  }
}

const MOST_TURNS = 40;
/** In standard deviations. */
const SETTLED = 1e-6;
