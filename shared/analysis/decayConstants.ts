import { averagedAt, averagedMotion, slopes } from '../physics/motion/averagedMotion';
import type { Damping } from '../physics/motion/damping';
import { mustBeAboveZero } from '../physics/mustBe';
import type { Measured } from '../schemas/common';
import { cos, log, sin } from '../physics/elementary';
import { hypot } from '../statistics/hypot';

export interface DecayConstants {
  /** Loss of amplitude in one swing, as a share of it: the logarithmic decrement where the loss is small. */
  logarithmicDecrement: number;
  /** 2π times energy over the energy one swing loses; Infinity without damping. */
  qualityFactor: number;
  /** Swings until half of the amplitude is left; null when it takes more than `MOST_SWINGS`. */
  halfLifeSwings: number | null;
  /** Rate of the viscous part, γ of A = A₀ e^(−γt), 1/s. */
  viscousRate: number;
}

const MOST_SWINGS = 10_000;

/**
 * Decay of a swing at an amplitude, whatever the mixture of laws. Only viscous damping has the same
 * constants at every amplitude; for the others they are those of this amplitude.
 *
 * @param damping      as in the motion fit, pure numbers
 * @param amplitude    rad, in (0, π)
 * @param smallPeriod  T0, s, > 0
 * @example decayConstants({ viscous: 0.005, quadratic: 0, dry: 0 }, 0.1, 2).qualityFactor // 100
 * @see Q = π/δ = ω/2γ for small viscous damping
 */
export function decayConstants(damping: Damping, amplitude: number, smallPeriod: number): DecayConstants {
  mustBeAboveZero('decayConstants', { amplitude, smallPeriod });
  const lost = -slopes(amplitude, damping)[0];
  return {
    logarithmicDecrement: lost / amplitude,
    // Energy 2 sin²(A/2) m g L, of which sin A dA goes.
    qualityFactor: lost === 0 ? Infinity : (2 * Math.PI * sin(amplitude / 2)) / cos(amplitude / 2) / lost,
    halfLifeSwings: swingsUntil(amplitude / 2, amplitude, damping),
    viscousRate: (damping.viscous * 2 * Math.PI) / smallPeriod,
  };
}

/**
 * Logarithmic decrement from two amplitudes read some swings apart, ln(A₁/A₂)/n, and Q = π/δ.
 *
 * @param swings  > 0
 * @returns       undefined when an amplitude is not above 0, or the later is not the smaller
 * @example decrementFrom({ value: 20, u: 1 }, { value: 10, u: 1 }, 20)?.logarithmicDecrement.value // 0.0347
 */
export function decrementFrom(
  first: Measured,
  last: Measured,
  swings: number,
): { logarithmicDecrement: Measured; qualityFactor: Measured } | undefined {
  mustBeAboveZero('decrementFrom', { swings });
  if (!(last.value > 0 && first.value > last.value)) return undefined;
  const value = log(first.value / last.value) / swings;
  const u = hypot(first.u / first.value, last.u / last.value) / swings;
  const q = Math.PI / value;
  return { logarithmicDecrement: { value, u }, qualityFactor: { value: q, u: (q * u) / value } };
}

function swingsUntil(target: number, from: number, damping: Damping): number | null {
  for (let most = 100; most <= MOST_SWINGS; most *= 10) {
    const table = averagedMotion(from, damping, most);
    if (averagedAt(table, most).amplitude > target) continue;
    let [low, high] = [0, most];
    while (high - low > 1e-6 * high) {
      const middle = (low + high) / 2;
      if (averagedAt(table, middle).amplitude > target) low = middle;
      else high = middle;
    }
    return high;
  }
  return null;
}
