import { mustBeAboveZero, mustNotBeNegative } from './mustBe';
import { periodRatio, periodRatioSlope } from './periodRatio';

/** What takes the swing away, as in θ'' = −ω² sin θ − 2 viscous θ' − quadratic θ'|θ'| − dry ω² sign θ'. None negative. */
export interface Damping {
  /** γ, 1/s. */
  viscous: number;
  /** β, a number. */
  quadratic: number;
  /** c, a number. */
  dry: number;
}

export const LAWS = ['viscous', 'quadratic', 'dry'] as const;
export type DampingLaw = (typeof LAWS)[number];

/**
 * Loss of amplitude by each law, from the energy a cycle takes away, at any amplitude:
 * γ 32[E − k'²K]/(4K sin A), ω β 8(sin A − A cos A)/(4K sin A), ω c 4A/(4K sin A).
 *
 * @param amplitude    rad, in [0, π)
 * @param smallPeriod  T0, s, > 0
 * @returns            rad/s, each ≥ 0; at small amplitudes γA, ω (4/3π) β A², ω (2/π) c
 * @throws {RangeError} naming the argument out of range
 * @see averaging over a cycle; small angles: Squire, Am. J. Phys. 54, 984 (1986) (from memory)
 */
export function decayShares(amplitude: number, damping: Damping, smallPeriod: number): Damping {
  mustBeAboveZero('decayShares', { smallPeriod });
  mustNotBeNegative('decayShares', { ...damping });
  const omega = (2 * Math.PI) / smallPeriod;
  const ratio = periodRatio(amplitude); // 2K/π
  // Below 1e-4 rad sin A − A cos A would cancel; its series' next term is A²/10.
  const quadratic =
    amplitude < 1e-4
      ? (4 / (3 * Math.PI)) * amplitude ** 2
      : (4 * (Math.sin(amplitude) - amplitude * Math.cos(amplitude))) / (Math.PI * ratio * Math.sin(amplitude));
  const dry = amplitude < 1e-8 ? 2 / Math.PI : (2 * amplitude) / (Math.PI * ratio * Math.sin(amplitude));
  return {
    viscous: (damping.viscous * 8 * periodRatioSlope(amplitude)) / ratio,
    quadratic: omega * damping.quadratic * quadratic,
    dry: omega * damping.dry * dry,
  };
}

/** All of `decayShares` together: −dA/dt, rad/s. */
export function decayRate(amplitude: number, damping: Damping, smallPeriod: number): number {
  const { viscous, quadratic, dry } = decayShares(amplitude, damping, smallPeriod);
  return viscous + quadratic + dry;
}
