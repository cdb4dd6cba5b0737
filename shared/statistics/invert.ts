/**
 * Inverse of a small symmetric positive definite matrix.
 *
 * @returns  undefined when it is singular or not finite
 */
export function invert(matrix: number[][]): number[][] | undefined {
  const n = matrix.length;
  const scale = matrix.map((row, i) => 1 / Math.sqrt(row[i]!));
  for (const s of scale) if (!(Number.isFinite(s) && s > 0)) return undefined;
  const lower = cholesky(matrix.map((row, i) => row.map((v, j) => v * scale[i]! * scale[j]!)));
  if (!lower) return undefined;
  const inverse = matrix.map((row) => row.map(() => 0));
  const x = new Array<number>(n).fill(0);
  for (let k = 0; k < n; k += 1) {
    for (let i = k; i < n; i += 1) {
      let rest = i === k ? 1 : 0;
      for (let j = k; j < i; j += 1) rest -= lower[i]![j]! * x[j]!;
      x[i] = rest / lower[i]![i]!;
    }
    for (let i = n - 1; i >= k; i -= 1) {
      let rest = x[i]!;
      for (let j = i + 1; j < n; j += 1) rest -= lower[j]![i]! * x[j]!;
      x[i] = rest / lower[i]![i]!;
      inverse[i]![k] = inverse[k]![i] = x[i]! * scale[i]! * scale[k]!;
    }
  }
  return inverse;
}

/**
 * Lower triangle L with L Lᵀ = matrix.
 *
 * @returns  undefined when the matrix is not positive definite
 */
export function cholesky(matrix: number[][]): number[][] | undefined {
  const lower = matrix.map((row) => row.map(() => 0));
  for (let i = 0; i < matrix.length; i += 1) {
    for (let j = 0; j <= i; j += 1) {
      const rest = matrix[i]![j]! - partial(lower[i]!, lower[j]!, j);
      if (i === j && !(rest > 1e-14 * matrix[i]![i]!)) return undefined;
      lower[i]![j] = i === j ? Math.sqrt(rest) : rest / lower[j]![j]!;
    }
  }
  return lower;
}

/**
 * As `cholesky`, for matrices with directions of no size at all: those get a column of zeros.
 */
export function semidefiniteRoot(matrix: number[][]): number[][] {
  const lower = matrix.map((row) => row.map(() => 0));
  for (let j = 0; j < matrix.length; j += 1) {
    const pivot = matrix[j]![j]! - partial(lower[j]!, lower[j]!, j);
    if (!(pivot > 1e-13 * matrix[j]![j]!)) continue;
    for (let i = j; i < matrix.length; i += 1) {
      lower[i]![j] = (matrix[i]![j]! - partial(lower[i]!, lower[j]!, j)) / Math.sqrt(pivot);
    }
  }
  return lower;
}

function partial(a: number[], b: number[], count: number): number {
  let sum = 0;
  for (let k = 0; k < count; k += 1) sum += a[k]! * b[k]!;
  return sum;
}
