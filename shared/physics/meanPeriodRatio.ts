import { amplitudeAlong, type AmplitudeCurve } from './amplitudeCurve';
import { periodRatio } from './periodRatio';

/** Nodes and weights of the three-point Gauss rule on [0, 1]. */
const GAUSS = [
  [0.5 - Math.sqrt(0.15), 5 / 18],
  [0.5, 8 / 18],
  [0.5 + Math.sqrt(0.15), 5 / 18],
] as const;
const MOST_CELLS = 16;

/**
 * How many small-amplitude periods go by until each of a row of swings: the sum of T/T0 along the
 * falling amplitude. Marks lie on a straight line against it, with slope T0.
 *
 * @param curve   the amplitude
 * @param swings  rising, counted as the curve counts
 * @returns       0 at the first, then rising
 * @example smallPeriodsElapsed(constantCurve(Math.PI / 2), [0, 10]) // [0, 11.8034]
 */
export function smallPeriodsElapsed(curve: AmplitudeCurve, swings: number[]): number[] {
  const amplitude = amplitudeAlong(curve);
  let sum = 0;
  return swings.map((swing, i) => {
    if (i > 0) sum += integral(amplitude, swings[i - 1]!, swing);
    return sum;
  });
}

/**
 * Mean of T/T0 over a stretch of swings with falling amplitude.
 *
 * @param curve  the amplitude
 * @param from   swing, and
 * @param to     a later one
 * @returns      ≥ 1
 * @example meanPeriodRatio({ from: 0, to: 30, first: radians(20), last: radians(12), law: 0 }, 0, 30) // 1.00479
 */
export function meanPeriodRatio(curve: AmplitudeCurve, from: number, to: number): number {
  return integral(amplitudeAlong(curve), from, to) / (to - from);
}

function integral(amplitude: (swing: number) => number, from: number, to: number): number {
  const cells = Math.min(Math.max(Math.ceil(to - from), 1), MOST_CELLS);
  const width = (to - from) / cells;
  let sum = 0;
  for (let cell = 0; cell < cells; cell += 1) {
    for (const [node, weight] of GAUSS) {
      sum += weight * periodRatio(amplitude(from + (cell + node) * width));
    }
  }
  return sum * width;
}
