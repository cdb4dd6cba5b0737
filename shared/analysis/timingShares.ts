import type { BudgetLine } from '../schemas/analysis';
import type { LineFit } from '../statistics/fitLine';
import { slopeUncertainty } from '../statistics/slopeUncertainty';
import type { RunView } from '../timing/runView';
import { hypot } from '../statistics/hypot';

/**
 * Standard deviation of one hand-timed instant, s, from 4304 readings of a single anticipated event.
 * Used where the run itself has too few marks to tell.
 * @see Am. J. Phys. 87, 110 (2019), "Manual timing in physics experiments: Error and uncertainty"
 */
export const HAND_U = 0.07;
/**
 * Rate of an uncorrected crystal clock: within 50 parts in a million, rectangular. Good crystals keep 20,
 * a median of 78 was seen over 20 000 hosts on a network.
 * @see D. L. Mills, Computer Network Time Synchronization (the hosts); common practice (the limit)
 */
export const CLOCK_RATE_U = 50e-6 / Math.sqrt(3);
/** With fewer points than this left over, a run does not know its own jitter. */
const FEWEST_SPARE = 3;

export interface Scatter {
  shares: BudgetLine[];
  jitter: number | null;
  lag1: number | null;
}

/** What timing brings to a slope, s: scatter about the line or the hand's known jitter, and the reading step. */
export function timingShares(view: RunView, line: LineFit): Scatter {
  const weights = hypot(...line.slopeWeights);
  const found = slopeUncertainty(line);
  const reading: BudgetLine = {
    term: 'reading',
    type: 'B',
    u: (weights * view.readingStep) / Math.sqrt(12),
    dof: null,
  };
  const scatter: BudgetLine[] = found ? [{ term: 'timing', type: 'A', u: found.u, dof: found.dof }] : [];
  const isFew = line.residuals.length - line.basis.length < FEWEST_SPARE;
  const isByHand = view.capture.kind !== 'gate';
  const byHand: BudgetLine = { term: 'hand', type: 'B', u: weights * HAND_U, dof: null };
  const shares = isFew && isByHand && !(found && found.u > byHand.u) ? [byHand] : scatter;
  return { shares: [...shares, reading], jitter: found?.jitter ?? null, lag1: found?.lag1 ?? null };
}

/** The clock's rate, s. */
export function clockShare(period: number): BudgetLine {
  return { term: 'clock', type: 'B', u: Math.abs(period) * CLOCK_RATE_U, dof: null };
}
