import type { Damping } from './damping';
import { FINE, halfSwing, passAt, slopeAt, valueAt, type HalfSwing } from './halfSwing';

/** A turning point: when, and how far from the lowest point, on the side it was released from when `turn` is even. */
export interface Turn {
  time: number;
  amplitude: number;
}

/** A released pendulum, in units of 1/ω0 and rad, from rest on the positive side. */
export interface Motion {
  /** The release is turn 0. */
  turns: Turn[];
  halfSwings: HalfSwing[];
  /** True when it came to rest for good before as many half swings as were asked for. */
  isStopped: boolean;
}

/**
 * The motion of a pendulum released from rest, integrated at full amplitude. Dry friction changes sign
 * exactly at the turning points and holds the bob at the first one with |sin θ| ≤ dry.
 *
 * @param amplitude   rad, in (0, π); passes right to 1e-9 below 150° and to 1e-7 at 170°
 * @param halfSwings  how many to follow at most
 * @param tolerance   of a step; a larger one is faster
 * @example releaseMotion(Math.PI / 3, { viscous: 0, quadratic: 0, dry: 0 }, 2).turns[2].time // 6.7430014192
 * @see reference runs in tests/reference/damped.json
 */
export function releaseMotion(amplitude: number, damping: Damping, halfSwings: number, tolerance = FINE): Motion {
  const turns: Turn[] = [{ time: 0, amplitude }];
  const done: HalfSwing[] = [];
  while (done.length < halfSwings) {
    const { time, amplitude: from } = turns.at(-1)!;
    const next = halfSwing(from, damping, tolerance);
    if (!next) break;
    done.push(next);
    turns.push({ time: time + next.duration, amplitude: next.reached });
    if (next.reached <= 0) break;
  }
  return { turns, halfSwings: done, isStopped: done.length < halfSwings };
}

/** A pass of an angle. */
export interface Pass {
  time: number;
  /** θ′, negative when the bob comes from the side it was released on. */
  rate: number;
}

/**
 * The pass of an angle in the half swing after a turning point.
 *
 * @param turn   index of the turning point before it
 * @param angle  rad, positive on the side of the release; 0 is the lowest point
 * @returns      undefined when the bob does not get there in that half swing
 */
export function passOf({ turns, halfSwings }: Motion, turn: number, angle = 0): Pass | undefined {
  const side = turn % 2 === 0 ? 1 : -1;
  const half = halfSwings[turn];
  const pass = half && passAt(half, side * angle);
  return pass && { time: turns[turn]!.time + pass.time, rate: side * pass.rate };
}

/**
 * Angle and angular velocity at any time.
 *
 * @param time  since the release; before it and after the last half swing the bob is taken as at rest
 */
export function stateAt({ turns, halfSwings }: Motion, time: number): { angle: number; rate: number } {
  let [low, high] = [0, halfSwings.length];
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (turns[middle]!.time <= time) low = middle;
    else high = middle;
  }
  const side = low % 2 === 0 ? 1 : -1;
  const half = halfSwings[low];
  if (!half || time < 0) return { angle: turns[0]!.amplitude, rate: 0 };
  const since = Math.min(time - turns[low]!.time, half.duration);
  const piece = half.pieces.findLast((one) => one.start <= since)!;
  const x = since - piece.start;
  return { angle: side * valueAt(piece.angle, x), rate: side * slopeAt(piece.angle, x) };
}
