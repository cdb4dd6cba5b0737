import { asin, sin } from './elementary';
import { hypot } from '../statistics/hypot';

/**
 * Amplitude from the speed of a flag through a gate near the lowest point:
 * sin²(A/2) = (θ' T0/4π)² + sin²(φ/2), with θ' = width/(distance × blocked time).
 *
 * @param flag         angular width of the flag seen from the pivot, rad, > 0
 * @param blockedTime  s, > 0
 * @param smallPeriod  T0, s, > 0
 * @param offCentre    angle φ of the gate from the lowest point, rad; 0 unless known
 * @returns            rad; undefined when no swing is that fast
 * @example amplitudeFromBlock(0.025, 0.0457, 2.0064) // 0.175 rad, 10°
 * @see energy of the pendulum; elementary, no single source
 */
export function amplitudeFromBlock(
  flag: number,
  blockedTime: number,
  smallPeriod: number,
  offCentre = 0,
): number | undefined {
  const omega = (2 * Math.PI) / smallPeriod;
  // The mean speed over the flag is lower than at its middle by (ω dt)²/24.
  const angularSpeed = (flag / blockedTime) * (1 + (omega * blockedTime) ** 2 / 24);
  const half = hypot(angularSpeed / (2 * omega), sin(offCentre / 2));
  return half < 1 ? 2 * asin(half) : undefined;
}
