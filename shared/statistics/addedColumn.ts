import { dot, orthonormal, without } from './orthonormal';
import type { Scattered } from './slopeUncertainty';

/** A linear fit with one column more, ready for `slopeUncertainty`: its slope is `size`. */
export interface AddedColumn extends Scattered {
  size: number;
}

/**
 * How much of one more column there is in data that a linear model describes but for noise.
 *
 * @param y        the data, in order of time
 * @param columns  of the model
 * @param added    the column whose share is asked for
 * @returns        undefined when the columns do not tell it from the others
 * @example addedColumn([0, 1, 4, 9], [[1, 1, 1, 1], [0, 1, 2, 3]], [0, 1, 4, 9])?.size // 1
 */
export function addedColumn(y: number[], columns: number[][], added: number[]): AddedColumn | undefined {
  const basis = orthonormal([...columns, added]);
  if (!basis) return undefined;
  const along = basis.at(-1)!;
  const slopeWeights = along.map((q) => q / dot(along, added));
  return { size: dot(slopeWeights, y), slopeWeights, residuals: without(y, basis), basis };
}
