import type { Analysis } from '../schemas/analysis';
import type { Measured } from '../schemas/common';
import type { RunView } from '../timing/runView';
import { radians } from '../units/angle';
import { decayConstants, decrementFrom } from './decayConstants';
import { dampingFrom, lawFromReadings, preferredLaw, type LawFromReadings, type LawVerdict } from './preferredLaw';
import { readAmplitudes } from './readAmplitudes';

export interface DecayReport {
  /** Mean over the run, from the amplitudes at its first and last mark taken as independent. */
  decrement: Measured;
  qualityFactor: Measured;
  /** Swings from the start until half of the amplitude is left; null when it takes more than can be followed. */
  halfLifeSwings: number | null;
  /** By the motion fitted to the marks, at the start amplitude; null when none was fitted. */
  byMotion: LawVerdict | null;
  /** By the amplitude readings alone; null with fewer than three. */
  byReadings: LawFromReadings | null;
}

/**
 * What a run says of how its swing dies away: for a sheet, worked out from its analysis.
 *
 * @param view  of the same run
 * @returns     undefined while the decay is not known or nothing was lost
 */
export function decayReport(analysis: Analysis, view: Pick<RunView, 'amplitudes'>): DecayReport | undefined {
  const { amplitude, motion, small_period_s: smallPeriod, swings } = analysis;
  if (!amplitude?.decay_known || !smallPeriod || !swings) return undefined;
  const inRadians = ({ value, u }: Measured) => ({ value: radians(value), u: radians(u) });
  const start = inRadians(amplitude.start_deg);
  const mean = decrementFrom(start, inRadians(amplitude.end_deg), swings);
  if (!mean) return undefined;
  const viscous = { viscous: mean.logarithmicDecrement.value / (2 * Math.PI), quadratic: 0, dry: 0 };
  const damping = motion ? dampingFrom(motion, smallPeriod.value) : viscous;
  return {
    decrement: mean.logarithmicDecrement,
    qualityFactor: mean.qualityFactor,
    halfLifeSwings: decayConstants(damping, start.value, smallPeriod.value).halfLifeSwings,
    byMotion: motion && preferredLaw(motion, smallPeriod.value, start.value),
    byReadings: lawFromReadings(readAmplitudes(view.amplitudes).filter(({ u }) => u > 0)) ?? null,
  };
}
