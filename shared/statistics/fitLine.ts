import { dot, orthonormal } from './orthonormal';

/** A straight line through points in order of time, with what the uncertainty of its slope needs. */
export interface LineFit {
  slope: number;
  /** y of the line at x = 0. */
  intercept: number;
  /** By how much points of the odd kind lie above the others; 0 without kinds. */
  offset: number;
  residuals: number[];
  /** slope = Σ slopeWeights[i] y[i]. */
  slopeWeights: number[];
  /** Orthonormal columns that span the model. */
  basis: number[][];
}

/**
 * Ordinary least squares through points, optionally of two kinds that share the slope and differ by a
 * constant (passes to the left and to the right of a mark that is off centre).
 *
 * @param x      two or more numbers, not all equal
 * @param y      as many
 * @param isOdd  which points are of the second kind; leave it away for one kind
 * @returns      undefined when the points do not fix the line
 * @example fitLine([0, 1, 2], [1, 3, 5])?.slope // 2
 */
export function fitLine(x: number[], y: number[], isOdd?: boolean[]): LineFit | undefined {
  const columns = [x.map(() => 1), ...(isOdd ? [isOdd.map(Number)] : []), x];
  const basis = orthonormal(columns);
  if (!basis) return undefined;
  const along = basis.at(-1)!;
  const rise = dot(along, x);
  const slopeWeights = along.map((q) => q / rise);
  const slope = dot(slopeWeights, y);
  const flat = y.map((value, i) => value - slope * x[i]!);
  const intercept = average(isOdd ? flat.filter((_, i) => !isOdd[i]) : flat);
  const offset = isOdd ? average(flat.filter((_, i) => isOdd[i])) - intercept : 0;
  const residuals = flat.map((value, i) => value - intercept - (isOdd?.[i] ? offset : 0));
  return { slope, intercept, offset, residuals, slopeWeights, basis };
}

function average(numbers: number[]): number {
  return numbers.reduce((sum, v) => sum + v, 0) / numbers.length;
}
