import { averagedAt, averagedMotion } from '../../physics/motion/averagedMotion';
import type { Damping } from '../../physics/motion/damping';
import { passOf, releaseMotion } from '../../physics/motion/motion';
import { sin } from '../../physics/elementary';

/** What in a swing was marked: its turning points, or its passes of an angle near the lowest point. */
export type MotionEvent = 'turn' | 'pass';

/** Everything that shapes a motion, in units of 1/ω0 and rad. */
export interface Shape {
  /** At the first swing asked for. */
  amplitude: number;
  damping: Damping;
  /** Angle of a gate from the lowest point, on the side of the release. */
  gateAngle: number;
  /** Angular width of a flag. */
  flag: number;
}

/** What is to be predicted. Swing 0 is the turning point at or before the first mark. */
export interface Questions {
  event: MotionEvent;
  /** Swings of the marks. */
  swings: number[];
  /** Swings at which the amplitude is asked for. */
  amplitudesAt: number[];
  /** The earliest swing asked for, a multiple of ½; the motion is released there. */
  from: number;
  /** True when blocks of a flag are asked for. */
  hasFlag: boolean;
}

export interface Prediction {
  /** Of each mark, since the release. */
  times: Float64Array;
  /** How long each block lasts; empty without a flag. */
  blocked: Float64Array;
  amplitudes: Float64Array;
  /** dt/d(gateAngle) of the marks, and of the blocks. */
  timesPerAngle: Float64Array;
  blockedPerAngle: Float64Array;
}

/** From the turning point to the pass of the lowest point. */
const QUARTER = 0.25;

/** By the averaged law. @returns undefined when the bob does not get that far */
export function predictAveraged(shape: Shape, asked: Questions): Prediction | undefined {
  const last = Math.max(asked.swings.at(-1)! + QUARTER, ...asked.amplitudesAt) - asked.from;
  const table = averagedMotion(shape.amplitude, shape.damping, Math.max(last, 1));
  const answer = blank(asked);
  for (let i = 0; i < asked.swings.length; i += 1) {
    const swing = asked.swings[i]! - asked.from;
    if (asked.event === 'turn') {
      answer.times[i] = averagedAt(table, swing).time;
      continue;
    }
    const { amplitude, time } = averagedAt(table, swing + QUARTER);
    // Down from the side of the release after a whole number of swings, else up.
    const side = Math.round(2 * swing) % 2 === 0 ? -1 : 1;
    const k = sin(amplitude / 2);
    const offCentre = sin(shape.gateAngle / 2);
    const x = offCentre / k;
    const speed = 2 * Math.sqrt(k * k - offCentre * offCentre);
    if (!(Math.abs(x) < LARGEST_SHARE)) return undefined;
    answer.times[i] = time + delayOf(amplitude, shape.damping) + side * (x + (x * x * x * (1 + k * k)) / 6);
    answer.timesPerAngle[i] = side / speed;
    if (!asked.hasFlag) continue;
    const short = shape.flag / speed;
    // The mean speed over the flag is below that at its middle by (dt)²/24.
    answer.blocked[i] = short * (1 + (short * short) / 24);
    answer.blockedPerAngle[i] = (shape.flag * sin(shape.gateAngle)) / (speed * speed * speed);
  }
  asked.amplitudesAt.forEach((swing, i) => (answer.amplitudes[i] = averagedAt(table, swing - asked.from).amplitude));
  return answer;
}

/**
 * By how much damping makes a pass of the lowest point late against the middle of two turning points: the
 * perturbation of A cos t at t = π/2 over the speed there, to first order.
 */
function delayOf(amplitude: number, { viscous, quadratic, dry }: Damping): number {
  return viscous + (quadratic * amplitude) / 3 + dry / Math.max(amplitude, 1e-3);
}

/** A gate farther out than this share of the amplitude is not "near the lowest point". */
const LARGEST_SHARE = 0.95;

/** By integration at full amplitude. @returns undefined when the bob does not get that far */
export function predictIntegrated(shape: Shape, asked: Questions): Prediction | undefined {
  const last = asked.swings.at(-1)! - asked.from;
  const lastReading = Math.max(0, ...asked.amplitudesAt) - asked.from;
  const needed = Math.ceil(2 * last) + (asked.event === 'pass' ? 1 : 0);
  const halfSwings = Math.max(needed, Math.ceil(2 * lastReading));
  const motion = releaseMotion(shape.amplitude, shape.damping, halfSwings, TOLERANCE);
  if (motion.halfSwings.length < needed) return undefined;
  const answer = blank(asked);
  for (let i = 0; i < asked.swings.length; i += 1) {
    const turn = Math.round(2 * (asked.swings[i]! - asked.from));
    if (asked.event === 'turn') {
      answer.times[i] = motion.turns[turn]!.time;
      continue;
    }
    const side = turn % 2 === 0 ? 1 : -1;
    const edges = asked.hasFlag ? [side * shape.flag * 0.5, -side * shape.flag * 0.5] : [0];
    const passes = edges.map((edge) => passOf(motion, turn, shape.gateAngle + edge));
    const [first, second = first] = passes;
    if (!first || !second) return undefined;
    answer.times[i] = (first.time + second.time) / 2;
    answer.timesPerAngle[i] = (1 / first.rate + 1 / second.rate) / 2;
    if (!asked.hasFlag) continue;
    answer.blocked[i] = second.time - first.time;
    answer.blockedPerAngle[i] = 1 / second.rate - 1 / first.rate;
  }
  asked.amplitudesAt.forEach((swing, i) => (answer.amplitudes[i] = amplitudeBetween(motion.turns, swing - asked.from)));
  return answer;
}

/** Passes right to 1e-9 of a period or better, far below what marks show. */
const TOLERANCE = 1e-12;

/** True when every mark is at a turning point or the pass after one, which is where integration answers. */
export function isIntegrable({ swings, from }: Questions): boolean {
  return swings.every((swing) => Math.abs(2 * (swing - from) - Math.round(2 * (swing - from))) < 1e-9);
}

/** Along the fall from one turning point to the next; past the last one it stays. */
function amplitudeBetween(turns: { amplitude: number }[], swing: number): number {
  const before = Math.min(Math.max(Math.floor(2 * swing + 1e-9), 0), turns.length - 1);
  const after = Math.min(before + 1, turns.length - 1);
  const share = Math.min(Math.max(2 * swing - before, 0), 1);
  const [from, to] = [turns[before]!.amplitude, turns[after]!.amplitude];
  return Math.max(from + share * (to - from), 0);
}

function blank({ swings, amplitudesAt, hasFlag }: Questions): Prediction {
  const marks = () => new Float64Array(swings.length);
  const blocks = () => new Float64Array(hasFlag ? swings.length : 0);
  return {
    times: marks(),
    blocked: blocks(),
    amplitudes: new Float64Array(amplitudesAt.length),
    timesPerAngle: marks(),
    blockedPerAngle: blocks(),
  };
}
