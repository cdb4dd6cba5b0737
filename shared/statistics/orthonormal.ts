/**
 * Orthonormal columns that span what the given ones span.
 *
 * @param columns  as long as one another
 * @returns        undefined when one of them is a mixture of those before it
 * @see Gram–Schmidt, twice over because once loses digits: Giraud, Langou & Rozložník (2005) (from memory)
 */
export function orthonormal(columns: number[][]): number[][] | undefined {
  const basis: number[][] = [];
  for (const column of columns) {
    const rest = without(column, basis);
    const size = Math.sqrt(dot(rest, rest));
    if (!(size > 1e-9 * Math.sqrt(dot(column, column)))) return undefined;
    basis.push(rest.map((v) => v / size));
  }
  return basis;
}

/** What is left of a column when its shares along an orthonormal basis are taken away. */
export function without(column: number[], basis: number[][]): number[] {
  const rest = column.slice();
  for (let turn = 0; turn < 2; turn += 1) {
    for (const q of basis) {
      const share = dot(q, rest);
      for (let i = 0; i < rest.length; i += 1) rest[i]! -= share * q[i]!;
    }
  }
  return rest;
}

export function dot(a: number[], b: number[]): number {
  let sum = 0;
  for (let i = 0; i < a.length; i += 1) sum += a[i]! * b[i]!;
  return sum;
}
