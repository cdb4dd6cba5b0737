import { averagedAt, averagedMotion } from '../../physics/motion/averagedMotion';
import type { Damping } from '../../physics/motion/damping';
import { releaseMotion, type Turn } from '../../physics/motion/motion';
import type { Analysis } from '../../schemas/analysis';
import { radians } from '../../units/angle';
import { dampingFrom } from '../preferredLaw';

/** The motion an analysis states, to be drawn. Times in s since the first raw mark, angles in rad. */
export interface FittedMotion {
  /** ω0 = 2π/T0, 1/s. */
  angularFrequency: number;
  damping: Damping;
  /** Swing of the release, which is turning point 0. Swings after it are two turning points each. */
  from: number;
  /** Swing of the last mark. */
  last: number;
  /** How many turning points there are: up to the one after the last mark, fewer when the bob comes to rest. */
  turnCount: number;
  /** On the side of the release when `k` is even. @param k  0 to turnCount − 1 */
  turn: (k: number) => Turn;
}

/** Steps right to 1e-12 of the amplitude, as in the fit. */
const TOLERANCE = 1e-12;

/**
 * The motion of an analysis, followed from the release to the turning point after the last mark: by
 * integration where the analysis integrated, else by the averaged law, whose cost does not grow with the run.
 *
 * @returns undefined when the analysis has no motion, which is so without an amplitude
 */
export function fittedMotion(
  analysis: Pick<Analysis, 'motion' | 'small_period_s' | 'swings'>,
): FittedMotion | undefined {
  const { motion, small_period_s, swings: last } = analysis;
  if (!motion || !small_period_s || last === null) return undefined;
  const smallPeriod = small_period_s.value;
  const angularFrequency = (2 * Math.PI) / smallPeriod;
  const damping = dampingFrom(motion, smallPeriod);
  const from = motion.release_swing;
  const halfSwings = Math.ceil(2 * (last - from)) + 1;
  const follow = motion.path === 'integrated' ? integrated : averaged;
  const turns = follow(radians(motion.release_deg.value), damping, halfSwings);
  return {
    ...{ angularFrequency, damping, from, last },
    turnCount: turns.count,
    turn: (k) => {
      const { time, amplitude } = turns.at(k);
      return { time: motion.release_s + time / angularFrequency, amplitude };
    },
  };
}

/** Turning points in units of 1/ω0 since the release. */
interface Turns {
  count: number;
  at: (k: number) => Turn;
}

function integrated(amplitude: number, damping: Damping, halfSwings: number): Turns {
  const { turns } = releaseMotion(amplitude, damping, halfSwings, TOLERANCE);
  return { count: turns.length, at: (k) => turns[k]! };
}

function averaged(amplitude: number, damping: Damping, halfSwings: number): Turns {
  const table = averagedMotion(amplitude, damping, halfSwings / 2);
  return { count: halfSwings + 1, at: (k) => averagedAt(table, k / 2) };
}

/**
 * Amplitude at any swing of the run, along the fall from one turning point to the next.
 *
 * @returns rad, ≥ 0; past the last turning point it stays
 */
export function amplitudeAtSwing({ from, turnCount, turn }: FittedMotion, swing: number): number {
  const before = Math.min(Math.max(Math.floor(2 * (swing - from) + 1e-9), 0), turnCount - 1);
  const after = Math.min(before + 1, turnCount - 1);
  const share = Math.min(Math.max(2 * (swing - from) - before, 0), 1);
  const [here, there] = [turn(before).amplitude, turn(after).amplitude];
  return Math.max(here + share * (there - here), 0);
}
