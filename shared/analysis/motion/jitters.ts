import { quantile } from '../../statistics/quantile';
import type { LeftOver } from './leftOver';
import type { MotionData } from './motionData';

/** Standard deviations used as weights. */
export interface Jitters {
  /** Of a mark, s, and of a block, s. */
  jitter: number;
  blockJitter: number;
  /** What reading uncertainties are multiplied with. */
  readingFactor: number;
}

/** How much of the data the unknowns have taken. */
export interface Taken {
  marks: number;
  readings: number;
}

/** What jitter to reckon with when the marks cannot tell, s, and the least possible. */
export interface JitterLimits {
  usualJitter: number;
  leastJitter: number;
}

/** What the data's own scatter says. */
export function jittersOf(left: LeftOver, taken: Taken, data: MotionData, limits: JitterLimits): Jitters {
  return {
    jitter: markJitter(left, taken, limits),
    blockJitter: blockJitter(left.blocked, limits.leastJitter, data),
    readingFactor: readingFactor(left.readings, taken.readings),
  };
}

export function markJitter({ times }: LeftOver, taken: Taken, { usualJitter, leastJitter }: JitterLimits): number {
  const free = times.length - taken.marks;
  if (free < FEWEST_FREE) return usualJitter;
  return Math.max(Math.sqrt(times.reduce((sum, r) => sum + r * r, 0) / free), leastJitter);
}

/** With fewer marks left over, they do not tell their jitter. */
const FEWEST_FREE = 1.5;

/** By the median, so that a block broken by chatter does no harm. */
function blockJitter(left: Float64Array, least: number, { gate }: MotionData): number {
  if (left.length === 0) return 1;
  const scatter = 1.4826 * quantile(Array.from(left, Math.abs), 0.5);
  const few = left.length < 8 ? 0.002 * quantile(gate!.blocked!, 0.5) : 0;
  return Math.max(scatter, 2 * least, few);
}

/** Readings that scatter more than they claim are given the uncertainty they show. */
function readingFactor(left: Float64Array, taken: number): number {
  const free = left.length - taken;
  if (left.length < 4 || free < 1) return 1;
  return Math.max(1, Math.sqrt(left.reduce((sum, r) => sum + r * r, 0) / free));
}
