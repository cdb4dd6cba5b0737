import type { Places } from './motionUnknowns';
import type { Slopes } from './motionSlopes';
import type { Prediction } from './predictMotion';

export interface Moved {
  values: number[];
  prediction: Prediction;
}

/** Steps towards the mean as far as the motion can be followed. */
export function moveWithin(
  values: number[],
  mean: number[],
  places: Places,
  predict: (values: number[]) => Prediction | undefined,
): Moved | undefined {
  const amplitude = values[places.amplitude]!;
  const largest = Math.min((amplitude + Math.PI) / 2, 2 * amplitude, LARGEST_AMPLITUDE);
  let share = 1;
  for (let half = 0; half < 10; half += 1) {
    const tried = values.map((v, i) => v + share * (mean[i]! - v));
    tried[places.amplitude] = Math.min(Math.max(tried[places.amplitude]!, amplitude / 2), largest);
    tried[places.period] = Math.max(tried[places.period]!, values[places.period]! / 2);
    for (const place of places.losses) tried[place] = Math.min(Math.max(tried[place]!, 0), 2);
    const prediction = predict(tried);
    if (prediction) return { values: tried, prediction };
    share /= 2;
  }
  return undefined;
}

/**
 * A prediction carried along its slopes to values near by, in place of following the motion once more.
 *
 * @param slopes  about `values`
 */
export function alongSlopes(
  prediction: Prediction,
  { times, blocked, amplitudes }: Slopes,
  values: number[],
  near: number[],
  places: Places,
): Prediction {
  const moved = {
    ...prediction,
    times: prediction.times.slice(),
    blocked: prediction.blocked.slice(),
    amplitudes: prediction.amplitudes.slice(),
  };
  const scale = values[places.period]! / (2 * Math.PI);
  for (const place of [places.amplitude, ...places.losses, places.gateAngle, places.flagError]) {
    if (place < 0) continue;
    const by = near[place]! - values[place]!;
    for (let i = 0; i < moved.times.length; i += 1) moved.times[i]! += (by * times[place]![i]!) / scale;
    for (let i = 0; i < moved.blocked.length; i += 1) moved.blocked[i]! += (by * blocked[place]![i]!) / scale;
    for (let i = 0; i < moved.amplitudes.length; i += 1) moved.amplitudes[i]! += by * amplitudes[place]![i]!;
  }
  return moved;
}

/** rad. */
export const LARGEST_AMPLITUDE = (179.5 / 180) * Math.PI;
