import type { Places } from './motionUnknowns';
import type { Prediction } from './predictMotion';

/** Steps towards the mean as far as the motion can be followed. */
export function moveWithin(
  values: number[],
  mean: number[],
  places: Places,
  predict: (values: number[]) => Prediction | undefined,
) {
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

/** rad. */
export const LARGEST_AMPLITUDE = (179.5 / 180) * Math.PI;
