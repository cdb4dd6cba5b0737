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
  const start = values[places.start]!;
  const times = new Float64Array(data.times);
  for (let i = 0; i < times.length; i += 1)
    times[i]! -= start + scale * prediction.times[i]! + (data.isOdd?.[i] ? limp : 0);
  const blocked = new Float64Array(data.gate?.blocked ?? []);
  for (let i = 0; i < blocked.length; i += 1) blocked[i]! -= scale * prediction.blocked[i]!;
  const readings = new Float64Array(data.readings.length);
  data.readings.forEach(({ amplitude, u }, i) => (readings[i] = (amplitude - prediction.amplitudes[i]!) / u));
  return { times, blocked, readings };
}

/** −2 log of how likely what is left is, but for a constant, when the marks' jitter is not known beforehand. */
export function unlikeliness(left: LeftOver, marks: number, least: number): number {
  const squares = left.times.reduce((sum, r) => sum + r * r, 0);
  return Math.max(marks - 3, 0) * log(squares + marks * least ** 2) + left.readings.reduce((sum, r) => sum + r * r, 0);
}

const TWO_PI = 2 * Math.PI;
