import type { BudgetLine } from '../../schemas/analysis';
import { MAX_SWINGS } from '../../schemas/limits';
import { forecast } from '../forecast';
import { dominantTerm, predictPlan, type Prediction } from './predictPlan';
import type { TimingPlan } from './timingPlan';
import { hypot } from '../../statistics/hypot';

/** A precision to be reached: standard uncertainty over value. */
export interface Target {
  of: 'smallPeriod' | 'gravity';
  relative: number;
}

/** An effect to be seen: T at another amplitude, rad, timed the same way, must differ from T at this one. */
export interface AmplitudeEffect {
  otherAmplitude: number;
}

export type TargetVerdict = {
  /**
   * meets: as planned · swings, repeats: with as many as needed · floor: neither gets there ·
   * no_result: the plan gives no period, or no g for want of a length
   */
  code: 'meets' | 'swings' | 'repeats' | 'floor' | 'no_result';
  /** Relative standard uncertainty the plan reaches; null with no_result. */
  reached: number | null;
  /** Least swings that reach the target with these repeats, and least repeats with these swings; null when none do. */
  swingsNeeded: number | null;
  repeatsNeeded: number | null;
  /** What brings most of the uncertainty; with floor, of what is left after many repeats. */
  term: BudgetLine['term'] | null;
};

export type EffectVerdict = {
  /** sees: three standard uncertainties or more · hint: two to three · cannot_see: less · no_result: the plan gives no period */
  code: 'sees' | 'hint' | 'cannot_see' | 'no_result';
  /** Difference of the two T to be expected, s, its standard uncertainty, and the one over the other. */
  difference: number;
  u: number;
  sigma: number;
  /** Least swings with which it is seen at three standard uncertainties, repeats as planned; null when none do. */
  swingsNeeded: number | null;
};

/** Standard uncertainties from which an effect counts as seen, and from which it shows. Common practice. */
const SEEN = 3;
const HINT = 2;
/** More repeats than this nobody times in a lesson. */
const MOST_REPEATS = 100;

/**
 * Whether a plan reaches a precision, and what would.
 *
 * @example judgeTarget(plan, { of: 'smallPeriod', relative: 1e-3 }) // { code: 'swings', swingsNeeded: 24, … }
 */
export function judgeTarget(plan: TimingPlan, target: Target): TargetVerdict {
  const relativeU = (prediction: Prediction | undefined) => {
    const result = prediction?.[target.of];
    return result ? result.u / result.value : Infinity;
  };
  const prediction = predictPlan(plan);
  const reached = relativeU(prediction);
  if (!prediction || reached === Infinity) {
    return { code: 'no_result', reached: null, swingsNeeded: null, repeatsNeeded: null, term: null };
  }
  const reaches = (changed: Partial<TimingPlan>) => relativeU(predictPlan({ ...plan, ...changed })) <= target.relative;
  const swingsNeeded = leastSwings(plan, (swings) => reaches({ swings }));
  const repeatsNeeded = least(MOST_REPEATS, 1, (repeats) => reaches({ repeats }));
  const met = reached <= target.relative;
  const code = met ? 'meets' : swingsNeeded !== null ? 'swings' : repeatsNeeded !== null ? 'repeats' : 'floor';
  // What stands in the way is what is left when repeating has averaged all it can.
  const rest = code === 'floor' ? predictPlan({ ...plan, repeats: MOST_REPEATS })! : prediction;
  const budget = target.of === 'gravity' ? rest.gravityBudget : rest.budget;
  return { code, reached, swingsNeeded, repeatsNeeded, term: dominantTerm(budget) };
}

/**
 * Whether two runs like this, at two amplitudes, will show that T depends on it. Only what timing brings
 * counts: rule and clock are the same in both.
 *
 * @example judgeAmplitudeEffect(planAt10Degrees, { otherAmplitude: radians(20) }) // { code: 'sees', sigma: 3.2, … }
 */
export function judgeAmplitudeEffect(plan: TimingPlan, { otherAmplitude }: AmplitudeEffect): EffectVerdict {
  const compare = (swings: number) => {
    const here = predictPlan({ ...plan, swings });
    const there = predictPlan({ ...plan, swings, amplitude: { ...plan.amplitude, value: otherAmplitude } });
    if (!here || !there) return undefined;
    const difference = Math.abs(there.period - here.period);
    const u = hypot(here.timingU, there.timingU);
    return { difference, u, sigma: u > 0 ? difference / u : difference > 0 ? Infinity : 0 };
  };
  const found = compare(plan.swings);
  const swingsNeeded = leastSwings(plan, (swings) => (compare(swings)?.sigma ?? 0) >= SEEN);
  if (!found) return { code: 'no_result', difference: 0, u: 0, sigma: 0, swingsNeeded };
  const code = found.sigma >= SEEN ? 'sees' : found.sigma >= HINT ? 'hint' : 'cannot_see';
  return { code, ...found, swingsNeeded };
}

/** Whole swings in steps of the marks, as long as it swings. */
function leastSwings(plan: TimingPlan, holds: (swings: number) => boolean): number | null {
  const step = plan.way === 'line' ? Math.max(plan.swingsPerMark, 1) : 1;
  const { swings } = forecast({ ...plan, amplitude: plan.amplitude.value, swings: MAX_SWINGS });
  return least(Math.floor(swings), step, holds);
}

/** Least multiple of `step` up to `most` that holds, found by doubling, then halving. */
function least(most: number, step: number, holds: (n: number) => boolean): number | null {
  const top = Math.floor(most / step);
  if (top < 1) return null;
  let [low, high] = [0, 1];
  while (!holds(high * step)) {
    if (high >= top) return null;
    [low, high] = [high, Math.min(high * 2, top)];
  }
  while (high - low > 1) {
    const middle = Math.floor((low + high) / 2);
    if (holds(middle * step)) high = middle;
    else low = middle;
  }
  return high * step;
}
