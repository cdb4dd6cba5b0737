/**
 * Powers of evenly spread places between −1 and 1, as columns of a linear model: a smooth curve of any kind.
 *
 * @param x       numbers that rise
 * @param degree  of the highest power, ≥ 0
 * @returns       1, x, x² … of x brought to [−1, 1]
 * @example polynomials([0, 1, 2], 2) // [[1, 1, 1], [-1, 0, 1], [1, 0, 1]]
 */
export function polynomials(x: number[], degree: number): number[][] {
  const [first, last] = [x[0]!, x.at(-1)!];
  const scaled = x.map((v) => (2 * (v - first)) / (last - first) - 1);
  const columns = [x.map(() => 1)];
  while (columns.length <= degree) columns.push(columns.at(-1)!.map((v, i) => v * scaled[i]!));
  return columns;
}
