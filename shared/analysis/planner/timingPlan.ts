import type { Damping } from '../../physics/motion/damping';
import type { Measured } from '../../schemas/common';

/** How a setting is to be timed: what the planner needs to say how good it will be. SI. */
export interface TimingPlan {
  /** T0 to be expected, s, > 0. */
  smallPeriod: number;
  /** Reduced length, m; null when only the period is asked for. */
  length: Measured | null;
  /** At the first mark, rad, in (0, 179.5°). Its u is that of every amplitude reading. */
  amplitude: Measured;
  /** Whether the amplitude is read at the end as well. */
  readsEnd: boolean;
  damping: Damping;
  /** line: a mark each time, and the line through all. ends: start and stop alone. */
  way: 'line' | 'ends';
  /** 0.5 every pass, 1 every swing, k every k-th; for `line`. */
  swingsPerMark: number;
  swings: number;
  /** Runs of this kind at the setting. */
  repeats: number;
  /** Standard deviation of one tap, s, and how neighbouring taps err together, in [0, 1). */
  jitter: number;
  lag1: number;
  /** Last digit of the clock, s. */
  readingStep: number;
}
