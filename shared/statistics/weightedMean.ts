import type { Measured } from '../schemas/common';
import { chiSquareTail } from './chiSquare';

export interface WeightedMean {
  value: number;
  /** From the stated uncertainties alone. */
  u: number;
  /** u times the Birge ratio where that is above 1: what to state when the values scatter more than they claim. */
  inflatedU: number;
  /** √(χ²/(n − 1)): 1 when the scatter is what the uncertainties say; 0 for one value. */
  birgeRatio: number;
  chiSquare: number;
  dof: number;
  /** False when a scatter this wide would come by chance fewer than 5 times in 100. */
  isConsistent: boolean;
}

/**
 * Mean of independent results, weighted by 1/u².
 *
 * @param results  each with its standard uncertainty, > 0
 * @returns        undefined without a result
 * @throws {RangeError} for an uncertainty that is not above 0
 * @example weightedMean([{ value: 1, u: 0.1 }, { value: 2, u: 0.2 }])?.value // 1.2
 * @see Birge, Phys. Rev. 40, 207 (1932); Cox, Metrologia 39, 589 (2002), procedure A (both from memory)
 */
export function weightedMean(results: readonly Measured[]): WeightedMean | undefined {
  if (results.length === 0) return undefined;
  const bad = results.find(({ u }) => !(u > 0 && u < Infinity));
  if (bad) throw new RangeError(`weightedMean: an uncertainty is ${bad.u}, it must be above 0 and finite`);
  const weight = results.reduce((sum, { u }) => sum + 1 / u ** 2, 0);
  const value = results.reduce((sum, r) => sum + r.value / r.u ** 2, 0) / weight;
  const chiSquare = results.reduce((sum, r) => sum + ((r.value - value) / r.u) ** 2, 0);
  const dof = results.length - 1;
  const birgeRatio = dof === 0 ? 0 : Math.sqrt(chiSquare / dof);
  const u = 1 / Math.sqrt(weight);
  return {
    value,
    u,
    inflatedU: u * Math.max(1, birgeRatio),
    birgeRatio,
    chiSquare,
    dof,
    isConsistent: dof === 0 || chiSquareTail(chiSquare, dof) >= 0.05,
  };
}
