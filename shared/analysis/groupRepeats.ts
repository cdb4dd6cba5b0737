import { canonicalText } from '../schemas/canonical';
import type { Analysis, BudgetLine, Result } from '../schemas/analysis';
import type { Rig } from '../schemas/rig';
import { hypot } from '../statistics/hypot';
import { weightedMean, type WeightedMean } from '../statistics/weightedMean';
import { isSettled } from './openFlags';
import { summariseRepeats, type MethodProfile } from './summariseRepeats';

/** A run as far as it may repeat others. */
export interface RepeatRun {
  id: string;
  /** Runs of different places are never taken together: class and bench, say. */
  place: string;
  /** With the edits in force. */
  rig: Rig | null;
  isSetAside: boolean;
  analysis: Pick<Analysis, 'small_period_s' | 'budget' | 'flags'>;
}

/** Why a run stands in no group. */
export type LeftOut = 'set_aside' | 'count_open' | 'no_rig' | 'no_small_period';

/** Runs of one set-up. */
export interface Repeats {
  rig: Rig;
  /** Ids, in the order given. */
  runs: string[];
  /** T0 of the set-up, s; undefined with a single run. */
  mean: Result | undefined;
  /** How the runs' own uncertainties, without what all of them share, fit their scatter; undefined with a single run. */
  agreement: WeightedMean | undefined;
}

export interface RepeatSummary {
  /** In the order in which their first runs were given. */
  groups: Repeats[];
  leftOut: Record<LeftOut, string[]>;
}

/**
 * Sums up the repeats of each set-up: runs of one place whose rigs are the same in every field. A run that is set
 * aside, whose count is in doubt, or that does not say what it was timed on, stands in no group and is named.
 *
 * @param runs     in any order
 * @param profile  how the class states the uncertainty of a mean
 * @example groupRepeats(threeRunsOfOneRig, 'gum').groups[0]?.mean // { value: 2.006, … }
 * @see Birge, Phys. Rev. 40, 207 (1932), for the comparison (from memory)
 */
export function groupRepeats(runs: readonly RepeatRun[], profile: MethodProfile): RepeatSummary {
  const leftOut: RepeatSummary['leftOut'] = { set_aside: [], count_open: [], no_rig: [], no_small_period: [] };
  const groups = new Map<string, RepeatRun[]>();
  for (const run of runs) {
    const why = whyLeftOut(run);
    if (why) leftOut[why].push(run.id);
    else {
      const key = canonicalText([run.place, run.rig]);
      groups.set(key, [...(groups.get(key) ?? []), run]);
    }
  }
  return { groups: [...groups.values()].map((group) => sumUp(group, profile)), leftOut };
}

function whyLeftOut({ isSetAside, analysis, rig }: RepeatRun): LeftOut | undefined {
  if (isSetAside) return 'set_aside';
  if (!isSettled(analysis)) return 'count_open';
  if (rig === null) return 'no_rig';
  return analysis.small_period_s === null ? 'no_small_period' : undefined;
}

/** What each timing brings anew. All else, the rule, the clock, the eye for the angle, is the same for every repeat. */
const OWN: readonly BudgetLine['term'][] = ['timing', 'reading', 'hand'];

function sumUp(group: readonly RepeatRun[], profile: MethodProfile): Repeats {
  const results = group.map(({ analysis: { small_period_s, budget } }) => {
    const of = (isOwn: boolean) => budget.filter(({ term }) => OWN.includes(term) === isOwn).map(({ u }) => u);
    return { value: small_period_s!.value, u: hypot(...of(true)), sharedU: hypot(...of(false)) };
  });
  // The same share in every run, save for how far the bob was pulled: the middle one in square stands for all.
  const shared = Math.sqrt(results.reduce((sum, { sharedU }) => sum + sharedU ** 2, 0) / results.length);
  const mean = summariseRepeats(
    results.map(({ value }) => value),
    profile,
    shared,
  );
  const canCompare = results.length > 1 && results.every(({ u }) => u > 0);
  return {
    rig: group[0]!.rig!,
    runs: group.map(({ id }) => id),
    mean,
    agreement: canCompare ? weightedMean(results) : undefined,
  };
}
