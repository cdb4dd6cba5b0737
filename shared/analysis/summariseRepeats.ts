import type { Result } from '../schemas/analysis';
import { studentQuantile } from '../statistics/studentQuantile';
import { stateResult } from './stateResult';

/** How a class is asked to state the uncertainty of repeated readings. */
export const METHOD_PROFILES = ['half_range', 'standard_error', 'gum'] as const;
export type MethodProfile = (typeof METHOD_PROFILES)[number];

/**
 * Mean of repeats of one setting, with its uncertainty as the profile has it:
 *
 * - `half_range`: half of largest minus smallest is stated as it is (`expanded_u`), as in many schools; taken
 *   as a rectangular half-width, `u` is that over √3
 * - `standard_error`: s/√n, and twice that is stated
 * - `gum`: s/√n with n − 1 degrees of freedom and Student's factor, together with what all repeats share
 *
 * @param values  in SI, two or more
 * @param shared  standard uncertainty of what repeating does not average (length, clock), for `gum`
 * @returns       undefined with fewer than two values
 * @see JCGM 100:2008, 4.2 and G.3; half range: common practice in schools, no source
 */
export function summariseRepeats(values: readonly number[], profile: MethodProfile, shared = 0): Result | undefined {
  const n = values.length;
  if (n < 2) return undefined;
  const mean = values.reduce((sum, v) => sum + v, 0) / n;
  if (profile === 'half_range') {
    const halfRange = (Math.max(...values) - Math.min(...values)) / 2;
    return {
      value: mean,
      u: halfRange / Math.sqrt(3),
      dof: null,
      coverage_factor: Math.sqrt(3),
      expanded_u: halfRange,
    };
  }
  const standardError = Math.sqrt(values.reduce((sum, v) => sum + (v - mean) ** 2, 0) / (n - 1) / n);
  if (profile === 'standard_error') {
    return { value: mean, u: standardError, dof: n - 1, coverage_factor: 2, expanded_u: 2 * standardError };
  }
  const stated = stateResult(mean, [
    { u: standardError, dof: n - 1 },
    { u: shared, dof: null },
  ]);
  // No scatter and nothing shared: an infinite factor of nothing, stated as 0.
  return stated ?? { value: mean, u: 0, dof: null, coverage_factor: studentQuantile(0.95, Infinity), expanded_u: 0 };
}
