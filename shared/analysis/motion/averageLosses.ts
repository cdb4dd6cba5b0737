import { cholesky, invert } from '../../statistics/invert';
import { keepPositive } from '../../statistics/keepPositive';
import { exp, log } from '../../physics/elementary';

/** What the data say about the three losses, as −½ dᵀ information d + gradient · d with d the change of `values`. */
export interface LossEvidence {
  values: number[];
  information: number[][];
  gradient: number[];
}

/** What each loss may be before the data speak: their sum, and how far each may be off its part of it. */
export interface LossPrior {
  sum: number;
  spread: number;
}

export interface AveragedLosses {
  mean: number[];
  /** Of what is known in the end, and the part of it that the data still move. */
  covariance: number[][];
  within: number[][];
  /** How likely each set of LOSS_SETS is. */
  chances: number[];
}

/** Which of the three terms (viscous, quadratic, dry) act: each alone, pairs, all. */
export const LOSS_SETS = [[0], [1], [2], [0, 1], [0, 2], [1, 2], [0, 1, 2]] as const;

/**
 * Losses and their uncertainty when it is not known which terms of damping act and none can be negative.
 * Every set of terms is a hypothesis, all equally likely beforehand; a term more has to earn its place,
 * because its prior is spread over what it might have been. The answer is the average over the sets that are
 * not far less likely than the best.
 *
 * @returns undefined when the data are not finite
 * @see Bayesian model averaging: Hoeting, Madigan, Raftery & Volinsky, Stat. Sci. 14, 382 (1999) (from memory)
 */
export function averageLosses(data: LossEvidence, prior: LossPrior): AveragedLosses | undefined {
  const found = LOSS_SETS.map((set) => withSet(set, data, prior));
  const best = Math.max(...found.map((one) => one?.logEvidence ?? -Infinity));
  if (!Number.isFinite(best)) return undefined;
  const weights = found.map((one) => (one ? withinWindow(exp(one.logEvidence - best)) : 0));
  const total = weights.reduce((sum, w) => sum + w, 0);
  const chances = weights.map((w) => w / total);
  const mean = [0, 1, 2].map((k) => found.reduce((sum, one, m) => sum + (one ? chances[m]! * one.mean[k]! : 0), 0));
  const average = (of: (one: NonNullable<(typeof found)[number]>, i: number, j: number) => number) =>
    [0, 1, 2].map((i) =>
      [0, 1, 2].map((j) => found.reduce((sum, one, m) => sum + (one ? chances[m]! * of(one, i, j) : 0), 0)),
    );
  const within = average((one, i, j) => one.covariance[i]![j]!);
  const between = average((one, i, j) => (one.mean[i]! - mean[i]!) * (one.mean[j]! - mean[j]!));
  return { mean, within, covariance: within.map((row, i) => row.map((v, j) => v + between[i]![j]!)), chances };
}

/**
 * Sets far less likely than the best are left out, or a rare one that lies far off would widen every interval: Occam's
 * window, with a soft edge so that no digit of the data makes a jump.
 *
 * @param odds  against the best, in [0, 1]
 * @see Madigan & Raftery, J. Am. Stat. Assoc. 89, 1535 (1994), who leave out what is below 1/20; at 1/10 evidence
 *      counts as strong (Jeffreys; both from memory)
 */
function withinWindow(odds: number): number {
  const below = (WINDOW / odds) ** 2;
  return odds / (1 + below ** 2);
}

const WINDOW = 1 / 10;

/** Mean and covariance of all three when only those of a set act; the others are 0. */
function withSet(set: readonly number[], { values, information, gradient }: LossEvidence, prior: LossPrior) {
  const others = [0, 1, 2].filter((k) => !set.includes(k));
  const precision = 1 / prior.spread ** 2;
  const part = prior.sum / set.length;
  const inner = set.map((i) => set.map((j) => information[i]![j]! + (i === j ? precision : 0)));
  // Those that do not act are moved to 0, which the data may or may not like.
  let logEvidence = 0;
  for (const i of others) {
    logEvidence -= gradient[i]! * values[i]!;
    for (const j of others) logEvidence -= (information[i]![j]! * values[i]! * values[j]!) / 2;
  }
  const pull = set.map((i) => {
    const moved = others.reduce((sum, j) => sum + information[i]![j]! * values[j]!, 0);
    return gradient[i]! + moved + (part - values[i]!) * precision;
  });
  const covariance = invert(inner);
  const root = cholesky(inner);
  if (!covariance || !root) return undefined;
  const step = covariance.map((row) => row.reduce((sum, c, j) => sum + c * pull[j]!, 0));
  const bounded = keepPositive({ mean: step.map((d, i) => values[set[i]!]! + d), covariance });
  const off = set.reduce((sum, i) => sum + (part - values[i]!) ** 2, 0) * precision;
  logEvidence += step.reduce((sum, d, i) => sum + d * pull[i]!, 0) / 2 - off / 2;
  logEvidence += bounded.logShare - set.length * log(prior.spread);
  root.forEach((row, i) => (logEvidence -= log(row[i]!)));
  const all = (of: (i: number) => number) => [0, 1, 2].map((k) => (set.includes(k) ? of(set.indexOf(k)) : 0));
  if (!Number.isFinite(logEvidence)) return undefined;
  return {
    logEvidence,
    mean: all((i) => bounded.mean[i]!),
    covariance: [0, 1, 2].map((k) => all((j) => (set.includes(k) ? bounded.covariance[set.indexOf(k)]![j]! : 0))),
  };
}
