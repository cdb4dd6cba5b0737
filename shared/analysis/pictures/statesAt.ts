import { halfSwing, slopeAt, valueAt, type HalfSwing } from '../../physics/motion/halfSwing';
import type { FittedMotion } from './fittedMotion';

/** Where the bob is and how fast it swings. */
export interface MotionState {
  /** s since the first raw mark */
  time: number;
  /** rad from the lowest point, positive on the side of the release */
  angle: number;
  /** rad/s */
  rate: number;
}

/**
 * Angle and angular velocity of a fitted motion at some instants. Only the half swings these fall into are
 * integrated, each once, so the cost grows with what is asked for and not with the run.
 *
 * @param times  s since the first raw mark, rising; before the release and after the last turning point the
 *               bob counts as at rest there
 */
export function statesAt(motion: FittedMotion, times: ArrayLike<number>): MotionState[] {
  const { turn, turnCount, damping } = motion;
  let k = -1;
  let [start, end] = [-Infinity, -Infinity];
  let half: HalfSwing | undefined;
  return Array.from(times, (time) => {
    if (time <= turn(0).time) return { time, angle: turn(0).amplitude, rate: 0 };
    if (time >= end && k < turnCount - 1) {
      k = turnBefore(motion, time);
      start = turn(k).time;
      end = k < turnCount - 1 ? turn(k + 1).time : Infinity;
      half = k < turnCount - 1 ? halfSwing(turn(k).amplitude, damping) : undefined;
    }
    const side = k % 2 === 0 ? 1 : -1;
    if (!half) return { time, angle: side * turn(k).amplitude, rate: 0 };
    // 1/s: ω0, or by the averaged law what makes the half swing last as long as the law says.
    const pace = half.duration / (end - start);
    const since = (time - start) * pace;
    const piece = half.pieces.findLast((one) => one.start <= since)!;
    const x = since - piece.start;
    return { time, angle: side * valueAt(piece.angle, x), rate: side * slopeAt(piece.angle, x) * pace };
  });
}

/** Instants evenly spaced from one to another, both included. @param count  ≥ 2 */
export function evenInstants(from: number, to: number, count: number): Float64Array {
  return Float64Array.from({ length: count }, (_, i) => from + ((to - from) * i) / (count - 1));
}

/** The last turning point at or before an instant. */
function turnBefore({ turn, turnCount }: FittedMotion, time: number): number {
  let [low, high] = [0, turnCount];
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (turn(middle).time <= time) low = middle;
    else high = middle;
  }
  return low;
}
