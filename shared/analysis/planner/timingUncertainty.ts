import { fitLine } from '../../statistics/fitLine';
import { quadraticForm } from '../../statistics/slopeUncertainty';
import type { TimingPlan } from './timingPlan';
import { hypot } from '../../statistics/hypot';

/** What one run's marks leave uncertain of a slope. */
export interface TimingUncertainty {
  /** From jitter and its correlation, s. */
  jitterU: number;
  /** From the last digit of the clock, s. */
  readingU: number;
  /** Points left over to judge the jitter by, correlation allowed for; 0 when the run cannot tell. */
  spare: number;
}

/**
 * Uncertainty of T from the timing of one run.
 *
 * Independent taps give σ √(12/(n(n+1)(n+2))) for a line through n + 1 marks and √2 σ/n for the two ends;
 * correlated ones more, and less gain from many marks.
 *
 * @param plan     of which only the timing matters here
 * @param elapsed  what grows evenly with time, at each mark: swings, or small-amplitude periods
 * @returns        undefined when the marks do not fix a slope
 */
export function timingUncertainty(
  { way, swingsPerMark, jitter, lag1, readingStep }: TimingPlan,
  elapsed: number[],
): TimingUncertainty | undefined {
  if (way === 'ends') {
    const span = elapsed.at(-1)! - elapsed[0]!;
    if (!(span > 0)) return undefined;
    return { jitterU: (Math.SQRT2 * jitter) / span, readingU: readingStep / Math.sqrt(6) / span, spare: 0 };
  }
  // Passes of the two directions have a constant of their own, as in the analysis.
  const isOdd = swingsPerMark === 0.5 && elapsed.length > 2 ? elapsed.map((_, i) => i % 2 === 1) : undefined;
  const line = fitLine(elapsed, elapsed, isOdd);
  if (!line) return undefined;
  const free = elapsed.length - line.basis.length;
  return {
    jitterU: jitter * Math.sqrt(quadraticForm(line.slopeWeights, lag1)),
    readingU: (readingStep * hypot(...line.slopeWeights)) / Math.sqrt(12),
    spare: (free * (1 - lag1)) / (1 + lag1),
  };
}

/** Swings at which a plan has its marks, from 0. */
export function markSwings({ way, swingsPerMark, swings }: TimingPlan): number[] {
  if (way === 'ends') return [0, swings];
  const marks = Math.floor(swings / swingsPerMark + 1e-9) + 1;
  return Array.from({ length: marks }, (_, i) => i * swingsPerMark);
}
