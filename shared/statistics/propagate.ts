import type { Measured } from '../schemas/common';

/** Step of the differences, as a share of the quantity: small enough for a slope, large enough to be seen. */
const STEP = 1e-3;

/**
 * A result of several independent quantities, and what the uncertainty of each brings to it: slope times
 * standard uncertainty, the slope by differences.
 *
 * @param given   none below 0; each is moved by a thousandth of itself at most, and one at 0 only upwards
 * @param result  must be finite there
 * @returns       the result, and the signed share of each quantity in the result's unit
 * @example propagate({ a: { value: 2, u: 0.1 } }, ({ a }) => a ** 2) // { value: 4, shares: { a: 0.4 } }
 * @see JCGM 100:2008, 5.1
 */
export function propagate<Name extends string>(
  given: Readonly<Record<Name, Measured>>,
  result: (values: Record<Name, number>) => number,
): { value: number; shares: Record<Name, number> } {
  const names = Object.keys(given) as Name[];
  const each = (of: (name: Name) => number) =>
    Object.fromEntries(names.map((name) => [name, of(name)])) as Record<Name, number>;
  const values = each((name) => given[name].value);
  const moved = (name: Name, by: number) => result({ ...values, [name]: values[name] + by });
  const shares = each((name) => {
    const { value, u } = given[name];
    if (u === 0) return 0;
    const step = value > 0 ? Math.min(u, value * STEP) : u * STEP;
    const change = value > 0 ? (moved(name, step) - moved(name, -step)) / 2 : moved(name, step) - moved(name, 0);
    return (change / step) * u;
  });
  return { value: result(values), shares };
}
