import { averagedAt, averagedMotion } from '../physics/motion/averagedMotion';
import type { Damping } from '../physics/motion/damping';
import { mustBeAboveZero } from '../physics/mustBe';
import { MAX_SWINGS } from '../schemas/limits';
import { log } from '../physics/elementary';

export interface ForecastPlan {
  /** T0, s. */
  smallPeriod: number;
  /** At the first pass, rad, in (0, π). */
  amplitude: number;
  damping: Damping;
  /** Where to end: after so many swings, and/or when this amplitude is reached, rad. */
  swings?: number;
  until?: number;
}

export interface ForecastRow {
  /** Swings since the first pass. */
  swing: number;
  /** s since the first pass. */
  time: number;
  /** rad */
  amplitude: number;
}

export interface Forecast {
  /** One row a pass through the lowest point: every half swing. */
  passes: ForecastRow[];
  swings: number;
  /** s */
  duration: number;
  endAmplitude: number;
  /** What ended it: the swings asked for, the amplitude asked for, or that it came to rest. */
  endedBy: 'swings' | 'amplitude' | 'rest';
}

/** rad; a bob this far out is at rest for the eye. Common practice, no source. */
const AT_REST = (0.05 * Math.PI) / 180;

/**
 * What a pendulum will do: its passes, how the amplitude falls, how long it takes. By the averaged law,
 * whose amplitudes are right to 2e-4 up to 150° where the loss is a few per cent a swing.
 *
 * @throws {RangeError} naming the argument out of range
 * @example forecast({ smallPeriod: 2, amplitude: 0.1, damping: { viscous: 0, quadratic: 0, dry: 0 }, swings: 10 }).duration // 20.0125
 */
export function forecast({ smallPeriod, amplitude, damping, swings = MAX_SWINGS, until = 0 }: ForecastPlan): Forecast {
  mustBeAboveZero('forecast', { smallPeriod, amplitude, swings });
  const table = averagedMotion(amplitude, damping, swings);
  const passes: ForecastRow[] = [];
  for (let half = 0; half <= 2 * swings; half += 1) {
    const at = averagedAt(table, half / 2);
    const row = { swing: half / 2, time: (at.time * smallPeriod) / (2 * Math.PI), amplitude: at.amplitude };
    if (row.amplitude <= AT_REST) return ended(passes, row, 'rest');
    if (row.amplitude < until) return ended(passes, row, 'amplitude');
    passes.push(row);
  }
  return ended(passes, passes.at(-1)!, 'swings');
}

function ended(passes: ForecastRow[], by: ForecastRow, endedBy: Forecast['endedBy']): Forecast {
  const last = passes.at(-1) ?? by;
  return { passes, swings: last.swing, duration: last.time, endAmplitude: last.amplitude, endedBy };
}

/**
 * Viscous damping that leaves a share of the amplitude after some swings: a guess for a rig nobody has
 * watched die away yet.
 *
 * @param kept    share, in (0, 1]
 * @param swings  > 0
 * @example viscousGuess(0.9, 20).viscous // 8.4e-4
 */
export function viscousGuess(kept: number, swings: number): Damping {
  mustBeAboveZero('viscousGuess', { swings });
  if (!(kept > 0 && kept <= 1)) throw new RangeError(`viscousGuess: kept is ${kept}, it must be above 0 and at most 1`);
  return { viscous: -log(kept) / (2 * Math.PI * swings), quadratic: 0, dry: 0 };
}
