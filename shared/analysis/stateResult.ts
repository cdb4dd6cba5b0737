import type { Result } from '../schemas/analysis';
import { combinedUncertainty, effectiveDof, type Share } from '../statistics/effectiveDof';
import { studentQuantile } from '../statistics/studentQuantile';

/** Share of cases in which a stated interval is to hold the truth. */
const COVERAGE = 0.95;

/**
 * States a value with its shares of uncertainty: combined u, effective degrees of freedom and the factor
 * that covers 95 %.
 *
 * @returns null when a number is not finite, so that nothing that cannot be stated is stated
 * @see JCGM 100:2008, G.4
 */
export function stateResult(value: number, shares: readonly Share[]): Result | null {
  const u = combinedUncertainty(shares);
  const dof = effectiveDof(shares);
  const coverage_factor = studentQuantile(COVERAGE, dof ?? Infinity);
  const result = { value, u, dof, coverage_factor, expanded_u: coverage_factor * u };
  return Object.values(result).every((x) => x === null || Number.isFinite(x)) ? result : null;
}
