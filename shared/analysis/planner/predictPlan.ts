import { fitAmplitudes, type CurveDoubt } from '../../physics/fitAmplitudes';
import { gravityFrom } from '../../physics/gravity';
import { meanPeriodRatio, smallPeriodsElapsed } from '../../physics/meanPeriodRatio';
import { mustBeAboveZero, mustNotBeNegative } from '../../physics/mustBe';
import type { BudgetLine, Result } from '../../schemas/analysis';
import { forecast } from '../forecast';
import { stateResult } from '../stateResult';
import { clockShare } from '../timingShares';
import type { TimingPlan } from './timingPlan';
import { markSwings, timingUncertainty } from './timingUncertainty';
import { hypot } from '../../statistics/hypot';

/** What a plan will bring, before a single swing is timed. */
export interface Prediction {
  /** T as it will be measured: longer than T0 by the amplitude. */
  period: number;
  /** Standard uncertainty of that T from timing alone, all repeats together, s. */
  timingU: number;
  smallPeriod: Result;
  budget: BudgetLine[];
  /** null without a length. */
  gravity: Result | null;
  gravityBudget: BudgetLine[];
  /** T/T0 over the run. */
  ratio: number;
  /** rad */
  endAmplitude: number;
  /** Time a run takes, s, and all repeats of it. */
  duration: number;
  totalDuration: number;
}

/**
 * Predicted uncertainty of T0 and g for a plan, by the terms the analysis will state.
 *
 * Repeating averages what timing brings and nothing else: the same rule, clock and eye for the angle are
 * taken to be used each time.
 *
 * @returns  undefined when the plan cannot give a period: too few marks, or the bob at rest before the end
 * @throws {RangeError} naming the argument out of range
 * @example predictPlan({ …, smallPeriod: 2, swings: 20, jitter: 0.07, way: 'line' }).timingU // 0.0025
 */
export function predictPlan(plan: TimingPlan): Prediction | undefined {
  mustKeepRanges(plan);
  const seen = forecast({ ...plan, amplitude: plan.amplitude.value });
  if (seen.endedBy === 'rest') return undefined;
  const start = { swing: 0, amplitude: plan.amplitude.value, u: plan.amplitude.u };
  const end = { swing: plan.swings, amplitude: seen.endAmplitude, u: plan.amplitude.u };
  const { curve } = fitAmplitudes([start, end])!;
  // The analysis will know of the amplitude only what was read.
  const known = fitAmplitudes(plan.readsEnd ? [start, end] : [start])!;
  const elapsed = smallPeriodsElapsed(curve, markSwings(plan));
  const timing = timingUncertainty(plan, elapsed);
  if (!timing) return undefined;

  const ratio = meanPeriodRatio(curve, 0, plan.swings);
  const knownRatio = meanPeriodRatio(known.curve, 0, plan.swings);
  const averaged = Math.sqrt(plan.repeats);
  const isKnown = plan.way === 'line' && timing.spare >= 1;
  const budget: BudgetLine[] = [
    isKnown
      ? { term: 'timing', type: 'A', u: timing.jitterU / averaged, dof: timing.spare * plan.repeats }
      : { term: 'hand', type: 'B', u: timing.jitterU / averaged, dof: null },
    { term: 'reading', type: 'B', u: timing.readingU / averaged, dof: null },
    clockShare(plan.smallPeriod),
    ...(['amplitude', 'decay'] as const).map((term): BudgetLine => {
      const own = known.doubts.filter((doubt) => doubt.term === term);
      const u = plan.smallPeriod * hypot(...own.map((doubt) => effectOnRatio(doubt, knownRatio, plan.swings)));
      return { term, type: 'B', u, dof: null };
    }),
  ];
  const smallPeriod = stateResult(plan.smallPeriod, budget);
  if (!smallPeriod) return undefined;
  const period = plan.smallPeriod * ratio;
  return {
    period,
    timingU: (timing.jitterU * ratio) / averaged,
    smallPeriod,
    budget,
    ...gravityOf(plan, budget),
    ratio,
    endAmplitude: seen.endAmplitude,
    duration: period * plan.swings,
    totalDuration: period * plan.swings * plan.repeats,
  };
}

/** The term that brings most of an uncertainty. */
export function dominantTerm(budget: readonly BudgetLine[]): BudgetLine['term'] {
  return budget.reduce((most, line) => (line.u > most.u ? line : most)).term;
}

function effectOnRatio({ curves, weight }: CurveDoubt, best: number, swings: number): number {
  const [a, b] = curves.map((curve) => meanPeriodRatio(curve, 0, swings) / best);
  return weight * (b === undefined ? Math.abs(a! - 1) : Math.abs(a! - b) / 2);
}

function gravityOf({ length, smallPeriod }: TimingPlan, budget: BudgetLine[]) {
  if (!length) return { gravity: null, gravityBudget: [] };
  const value = gravityFrom(smallPeriod, length.value);
  const gravityBudget = [
    ...budget.map((line) => ({ ...line, u: (line.u * 2 * value) / smallPeriod })),
    { term: 'length', type: 'B', u: (value * length.u) / length.value, dof: null } as const,
  ];
  return { gravity: stateResult(value, gravityBudget), gravityBudget };
}

function mustKeepRanges(plan: TimingPlan): void {
  const { smallPeriod, swings, swingsPerMark, repeats, jitter, readingStep, lag1, amplitude, length } = plan;
  mustBeAboveZero('predictPlan', { smallPeriod, swings, swingsPerMark, repeats, amplitude: amplitude.value });
  mustNotBeNegative('predictPlan', { jitter, readingStep, amplitudeU: amplitude.u });
  if (length) mustBeAboveZero('predictPlan', { length: length.value });
  if (!(amplitude.value < Math.PI)) {
    throw new RangeError(`predictPlan: amplitude is ${amplitude.value} rad, it must be below π`);
  }
  if (!(lag1 >= 0 && lag1 < 1)) throw new RangeError(`predictPlan: lag1 is ${lag1}, it must be from 0 to below 1`);
}
