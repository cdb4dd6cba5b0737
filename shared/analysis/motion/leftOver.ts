import { log } from '../../physics/elementary';
import type { MotionData } from './motionData';
import type { Places } from './motionUnknowns';
import type { Prediction } from './predictMotion';

export interface LeftOver {
  times: Float64Array;
  blocked: Float64Array;
  /** In standard uncertainties as read. */
  readings: Float64Array;
}

/** Observed minus calculated. */
export function leftOver(values: number[], places: Places, prediction: Prediction, data: MotionData): LeftOver {
  const scale = values[places.period]! / TWO_PI;
  const limp = places.limp < 0 ? 0 : values[places.limp]!;
  return {
    times: Float64Array.from(
      data.times,
      (t, i) => t - values[places.start]! - scale * prediction.times[i]! - (data.isOdd?.[i] ? limp : 0),
    ),
    blocked: Float64Array.from(data.gate?.blocked ?? [], (t, i) => t - scale * prediction.blocked[i]!),
    readings: Float64Array.from(data.readings, ({ amplitude, u }, i) => (amplitude - prediction.amplitudes[i]!) / u),
  };
}

/** −2 log of how likely what is left is, but for a constant, when the marks' jitter is not known beforehand. */
export function unlikeliness(left: LeftOver, marks: number, least: number): number {
  const squares = left.times.reduce((sum, r) => sum + r * r, 0);
  return Math.max(marks - 3, 0) * log(squares + marks * least ** 2) + left.readings.reduce((sum, r) => sum + r * r, 0);
}

const TWO_PI = 2 * Math.PI;
