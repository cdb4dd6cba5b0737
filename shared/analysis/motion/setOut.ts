import type { MotionData } from './motionData';
import type { Places } from './motionUnknowns';
import type { Prediction } from './predictMotion';
import type { MotionStart } from './startMotion';

/** Parts of the loss to set out with: viscous, quadratic, dry. */
const MIXTURES = [
  [1 / 3, 1 / 3, 1 / 3],
  [0, 1, 0],
  [1, 0, 0],
  [0, 0, 1],
] as const;

/**
 * Values of the unknowns to set out with: of several parts the terms of damping may have in the loss, those
 * whose amplitudes come nearest to the readings.
 *
 * @returns undefined when none can be followed
 */
export function setOut(
  places: Places,
  begin: MotionStart,
  { readings }: MotionData,
  predict: (values: number[]) => Prediction | undefined,
): number[] | undefined {
  let best: number[] | undefined;
  let least = Infinity;
  for (const mixture of MIXTURES) {
    const start = firstValues(places, begin, mixture);
    const found = predict(start);
    const off =
      found && readings.reduce((sum, { amplitude, u }, i) => sum + ((amplitude - found.amplitudes[i]!) / u) ** 2, 0);
    if (off === undefined || off >= least) continue;
    [best, least] = [start, off];
  }
  return best;
}

function firstValues(places: Places, begin: MotionStart, mixture: readonly number[]): number[] {
  const values = new Array<number>(places.count).fill(0);
  values[places.start] = begin.start;
  values[places.period] = begin.period;
  if (places.limp >= 0) values[places.limp] = begin.limp;
  values[places.amplitude] = begin.amplitude;
  places.losses.forEach((place, k) => (values[place] = begin.loss * mixture[k]!));
  if (places.gateAngle >= 0) values[places.gateAngle] = begin.gateAngle;
  return values;
}
