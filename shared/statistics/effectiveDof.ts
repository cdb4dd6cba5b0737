import { hypot } from './hypot';

/** One share of an uncertainty. */
export interface Share {
  u: number;
  /** Degrees of freedom; null is infinite. */
  dof: number | null;
}

/**
 * Effective degrees of freedom of independent shares put together.
 *
 * @returns  null when infinite
 * @example effectiveDof([{ u: 0.25, dof: 9 }, { u: 0.57, dof: 4 }, { u: 0.82, dof: 14 }]) // 19.0
 * @see Welch–Satterthwaite formula, JCGM 100:2008 G.4.1
 */
export function effectiveDof(shares: readonly Share[]): number | null {
  const largest = Math.max(0, ...shares.map(({ u }) => u));
  if (largest === 0) return null;
  // Relative to the largest, so that fourth powers of very small numbers do not vanish.
  const parts = shares.map(({ u, dof }) => ({ variance: (u / largest) ** 2, dof }));
  const variance = parts.reduce((sum, part) => sum + part.variance, 0);
  const fourth = parts.reduce((sum, part) => sum + (part.dof === null ? 0 : part.variance ** 2 / part.dof), 0);
  const dof = variance ** 2 / fourth;
  return dof < 1e9 ? dof : null;
}

/** Root of the sum of squares of independent shares. */
export function combinedUncertainty(shares: readonly Share[]): number {
  return hypot(...shares.map(({ u }) => u));
}
