import type { Damping } from '../../physics/motion/damping';
import { slopes } from '../../physics/motion/averagedMotion';
import type { MotionData } from './motionData';
import type { Shape } from './predictMotion';

/** Places of the unknowns of a fit in their row; −1 for one that this run does not have. */
export interface Places {
  start: number;
  period: number;
  /** By how much passes the other way come later, s, for hands. */
  limp: number;
  amplitude: number;
  /** Shares of the amplitude lost in one swing at the reference amplitude: viscous, quadratic, dry. */
  losses: [number, number, number];
  gateAngle: number;
  /** By which share the flag is wider than entered. */
  flagError: number;
  count: number;
}

export function placesOf({ isOdd, gate }: MotionData): Places {
  let next = 0;
  const take = (is: boolean) => (is ? next++ : -1);
  return {
    start: take(true),
    period: take(true),
    limp: take(isOdd !== undefined && !gate),
    amplitude: take(true),
    losses: [take(true), take(true), take(true)],
    gateAngle: take(isOdd !== undefined && gate !== undefined),
    flagError: take(gate?.blocked !== undefined),
    count: next,
  };
}

/** What each term alone takes from the reference amplitude in one swing, as a share, per unit of its constant. */
export function lossRates(amplitude: number): [number, number, number] {
  const none: Damping = { viscous: 0, quadratic: 0, dry: 0 };
  const share = (damping: Damping) => -slopes(amplitude, damping)[0] / amplitude;
  // Small constants, because the viscous one also slows the swing.
  return [
    share({ ...none, viscous: 1e-6 }) * 1e6,
    share({ ...none, quadratic: 1e-6 }) * 1e6,
    share({ ...none, dry: 1e-6 }) * 1e6,
  ];
}

export function dampingOf(values: ArrayLike<number>, { losses }: Places, rates: readonly number[]): Damping {
  const [viscous, quadratic, dry] = losses.map((place, k) => Math.max(values[place]!, 0) / rates[k]!);
  return { viscous: viscous!, quadratic: quadratic!, dry: dry! };
}

export function shapeOf(
  values: ArrayLike<number>,
  places: Places,
  rates: readonly number[],
  gate: MotionData['gate'],
): Shape {
  return {
    amplitude: values[places.amplitude]!,
    damping: dampingOf(values, places, rates),
    gateAngle: places.gateAngle < 0 ? 0 : values[places.gateAngle]!,
    flag: (gate?.flag ?? 0) * (places.flagError < 0 ? 1 : 1 + values[places.flagError]!),
  };
}

/** Whether the averaged law is too rough to judge by. */
export function losesMuch(values: ArrayLike<number>, places: Places, rates: readonly number[]): boolean {
  const amplitude = values[places.amplitude]!;
  return -slopes(amplitude, dampingOf(values, places, rates))[0] > LARGE_LOSS * amplitude;
}

/** Where so large a share of the amplitude goes in the first swing, the averaged law is no good guide. */
const LARGE_LOSS = 0.04;
