import { cos, sin } from '../elementary';
import type { Damping } from './damping';

/** The law as a table over swings, evenly spaced; time in 1/ω0, counted from swing 0. */
export interface AveragedMotion {
  /** Swings from one row to the next. */
  step: number;
  amplitudes: Float64Array;
  times: Float64Array;
  /** dA/dn and dt/dn at the rows. */
  amplitudeSlopes: Float64Array;
  timeSlopes: Float64Array;
}

/** rad. Below it the bob counts as at rest. */
const LEAST_AMPLITUDE = 1e-7;
const LARGEST_AMPLITUDE = (179.9 / 180) * Math.PI;
const MOST_ROWS = 600;
const FEWEST_ROWS = 8;
/** Rows are as far apart as the first of them loses this share of the amplitude, within limits. */
const LOSS_PER_ROW = 0.03;
const FEWEST_PER_SWING = 0.2;
const MOST_PER_SWING = 16;

/**
 * How a pendulum's amplitude falls and its time grows, averaged over each swing: the energy every term
 * of damping takes from one swing at this amplitude, with the large-angle factors. The fast way to what
 * `releaseMotion` integrates: amplitudes after 39 swings right to 2e-6 up to 45° and to 2e-4 at 150° at
 * a loss of 3 % a swing.
 *
 * dA/dn = −{viscous 32 [E − k′²K] + quadratic 8 (sin A − A cos A) + 4 dry A}/sin A, dt/dn = 4K.
 *
 * @param amplitude  at swing 0, rad, in (0, π)
 * @param swings     how far the table is to go, > 0
 * @see small-angle limits: Squire, Am. J. Phys. 54, 984 (1986) (from memory); checked in tests against
 *      quadrature and integrated runs
 */
export function averagedMotion(amplitude: number, damping: Damping, swings: number): AveragedMotion {
  const lossAtFirst = -slopes(amplitude, damping)[0] / amplitude;
  const perSwing = Math.min(Math.max(lossAtFirst / LOSS_PER_ROW, FEWEST_PER_SWING), MOST_PER_SWING);
  const rows = Math.min(Math.max(Math.ceil(swings * perSwing), FEWEST_ROWS), MOST_ROWS);
  const step = swings / rows;
  const table: AveragedMotion = {
    step,
    amplitudes: new Float64Array(rows + 1),
    times: new Float64Array(rows + 1),
    amplitudeSlopes: new Float64Array(rows + 1),
    timeSlopes: new Float64Array(rows + 1),
  };
  let a = Math.min(amplitude, LARGEST_AMPLITUDE);
  let t = 0;
  for (let row = 0; ; row += 1) {
    const [da1, dt1] = slopes(a, damping);
    table.amplitudes[row] = a;
    table.times[row] = t;
    table.amplitudeSlopes[row] = da1;
    table.timeSlopes[row] = dt1;
    if (row === rows) return table;
    // Classical Runge–Kutta; time is a quadrature beside it.
    const [da2, dt2] = slopes(a + (step / 2) * da1, damping);
    const [da3, dt3] = slopes(a + (step / 2) * da2, damping);
    const [da4, dt4] = slopes(a + step * da3, damping);
    a = Math.max(a + (step / 6) * (da1 + 2 * da2 + 2 * da3 + da4), 0);
    t += (step / 6) * (dt1 + 2 * dt2 + 2 * dt3 + dt4);
  }
}

/** Amplitude and time at any swing, by Hermite's cubic; beyond the table along its ends. */
export function averagedAt(table: AveragedMotion, swing: number): { amplitude: number; time: number } {
  const rows = table.amplitudes.length - 1;
  const row = Math.min(Math.max(Math.floor(swing / table.step), 0), rows - 1);
  const x = swing / table.step - row;
  return {
    amplitude: Math.max(hermite(table.amplitudes, table.amplitudeSlopes, row, x, table.step), 0),
    time: hermite(table.times, table.timeSlopes, row, x, table.step),
  };
}

/**
 * Change of amplitude and of time in one swing.
 *
 * @param amplitude  rad; at rest both are those of the smallest swing
 * @returns          dA/dn ≤ 0 in rad, dt/dn in 1/ω0
 */
export function slopes(amplitude: number, { viscous, quadratic, dry }: Damping): [lost: number, time: number] {
  if (!(amplitude > LEAST_AMPLITUDE)) return [0, 2 * Math.PI];
  const A = Math.min(amplitude, LARGEST_AMPLITUDE);
  const [halfSine, halfCosine] = [sin(A / 2), cos(A / 2)];
  const quarterSine = sin(A / 4);
  // K = π/2a and E − k′²K = K (k² − Σ 2^(n−1) c_n²) from the same means: Abramowitz & Stegun 17.6.3, 17.6.4.
  let a = 1;
  let b = halfCosine;
  let c = quarterSine * quarterSine;
  let weight = 1;
  let sum = (halfSine * halfSine) / 2;
  while (c > 1e-9) {
    sum -= weight * c * c;
    const mean = (a + b) / 2;
    b = Math.sqrt(a * b);
    a = mean;
    c = (a - b) / 2;
    weight *= 2;
  }
  sum -= weight * c * c;
  const K = Math.PI / (a + b);
  const sine = 2 * halfSine * halfCosine;
  const cosine = 1 - 2 * halfSine * halfSine;
  // sin A − A cos A loses its digits at small amplitudes; there its series takes over.
  const drag = A < 0.1 ? A * A * A * (1 / 3 - (A * A) / 30 + (A * A * A * A) / 840) : sine - A * cosine;
  const lost = (viscous * 32 * K * sum + quadratic * 8 * drag + 4 * dry * A) / sine;
  // Viscous damping slows the swing to √(ω0² − γ²); the others do not at first order.
  const slowed = 1 + (viscous * viscous) / 2;
  return [-lost * slowed, 4 * K * slowed];
}

function hermite(values: Float64Array, perUnit: Float64Array, row: number, x: number, step: number): number {
  const [from, to] = [values[row]!, values[row + 1]!];
  const [rise, fall] = [perUnit[row]! * step, perUnit[row + 1]! * step];
  if (x < 0) return from + x * rise;
  if (x > 1) return to + (x - 1) * fall;
  const bend = to - from;
  return from + x * (rise + x * (3 * bend - 2 * rise - fall + x * (rise + fall - 2 * bend)));
}
