import { pow } from './elementary';

/** An amplitude in rad after a number of swings. */
export interface AmplitudePoint {
  swing: number;
  amplitude: number;
  /** Standard uncertainty, rad. */
  u: number;
}

/**
 * How the amplitude falls: through `first` at swing `from` and `last` at swing `to`, along
 * dA/dn ∝ A^(1−law). Law 1 is dry friction (a straight line), 0 viscous (exponential), −1 drag as the
 * square of the speed (hyperbola); between them mixtures.
 * @see small-angle decay k0 + k1 A + k2 A²: Squire, Am. J. Phys. 54, 984 (1986) (from memory)
 */
export interface AmplitudeCurve {
  from: number;
  to: number;
  first: number;
  last: number;
  law: number;
}

const LARGEST_AMPLITUDE = (179.5 / 180) * Math.PI;
const SMALLEST_AMPLITUDE = 1e-6;

/**
 * Amplitude on a curve. Beyond the readings the same law goes on, down to rest.
 *
 * @param curve  from and to equal means a constant amplitude
 * @param swing  any
 * @returns      rad, in [0, 179.5°]
 * @example amplitudeAt({ from: 0, to: 20, first: 0.4, last: 0.1, law: 0 }, 10) // 0.2
 */
export function amplitudeAt(curve: AmplitudeCurve, swing: number): number {
  return amplitudeAlong(curve)(swing);
}

/** `amplitudeAt` for many swings on one curve: what they share is computed once. */
export function amplitudeAlong({ from, to, first, last, law }: AmplitudeCurve): (swing: number) => number {
  if (to === from) return () => clamp(first);
  const ratio = last / first;
  const share = (swing: number) => (swing - from) / (to - from);
  if (Math.abs(law) < 1e-8) return (swing) => clamp(first * pow(ratio, share(swing)));
  const change = pow(ratio, law) - 1;
  return (swing) => {
    const power = 1 + change * share(swing);
    if (power <= 0) return law > 0 ? 0 : LARGEST_AMPLITUDE;
    return clamp(first * pow(power, 1 / law));
  };
}

function clamp(amplitude: number): number {
  if (Number.isNaN(amplitude)) return SMALLEST_AMPLITUDE;
  return Math.min(Math.max(amplitude, 0), LARGEST_AMPLITUDE);
}
