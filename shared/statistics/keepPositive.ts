import { truncatedNormal } from './truncatedNormal';

/** A normal distribution of several unknowns. */
export interface Normal {
  mean: number[];
  covariance: number[][];
}

/** What a bound was worth: as if the unknown had been measured with this precision. */
export interface BoundedNormal extends Normal {
  /** 1/variance for each bounded unknown, in the order given; 0 where the bound says nothing. */
  precisions: number[];
}

/**
 * What is known of jointly normal unknowns when some of them cannot be negative. Each bound is put in the
 * place of a normal measurement with the same effect on mean and variance, in turns until they settle.
 *
 * @param normal   before the bounds
 * @param bounded  indexes of the unknowns that cannot be negative
 * @returns        means of bounded unknowns are above 0, and the variance smaller than before
 * @see expectation propagation: Minka (2001); Cunningham, Hennig & Lacoste-Julien, arXiv:1111.6832 (from memory)
 */
export function keepPositive({ mean, covariance }: Normal, bounded: number[]): BoundedNormal {
  const m = [...mean];
  const c = covariance.map((row) => [...row]);
  const precisions = bounded.map(() => 0);
  const shifts = bounded.map(() => 0);
  for (let turn = 0; turn < MOST_TURNS; turn += 1) {
    let moved = 0;
    bounded.forEach((k, b) => {
      const variance = c[k]![k]!;
      const left = 1 / variance - precisions[b]!;
      if (!(left > 0) || !Number.isFinite(left)) return;
      const alone = truncatedNormal((m[k]! / variance - shifts[b]!) / left, 1 / left);
      const precision = Math.max(1 / alone.variance - left, 0);
      const shift = alone.mean / alone.variance - (m[k]! / variance - shifts[b]!);
      const by = precision - precisions[b]!;
      const pull = shift - shifts[b]!;
      moved = Math.max(moved, Math.abs(alone.mean - m[k]!) / Math.sqrt(variance));
      // One more measurement of unknown k with precision `by`: the rank-one update of mean and covariance.
      const weight = 1 + by * variance;
      const column = c.map((row) => row[k]!);
      const step = (pull - by * m[k]!) / weight;
      for (let i = 0; i < m.length; i += 1) {
        m[i] = m[i]! + column[i]! * step;
        for (let j = 0; j < m.length; j += 1) c[i]![j] = c[i]![j]! - (column[i]! * column[j]! * by) / weight;
      }
      precisions[b] = precision;
      shifts[b] = shift;
    });
    if (moved < SETTLED) break;
  }
  return { mean: m, covariance: c, precisions };
}

const MOST_TURNS = 40;
/** In standard deviations. */
const SETTLED = 1e-6;
