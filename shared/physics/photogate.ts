import { mustBeAboveZero } from './mustBe';
import { periodRatio } from './periodRatio';
import { timeFromBottom } from './timeFromBottom';
import { sin } from './elementary';

/** Blocked and cleared edge of a beam, s. */
export type Block = readonly [blocked: number, cleared: number];

/** The instant a block stands for: half way between its edges, where the flag's middle went through. */
export function blockMidpoint([blocked, cleared]: Block): number {
  return (blocked + cleared) / 2;
}

/** What a gate sees: a flag of an angular width seen from the pivot, rad, and a beam off the lowest point by an angle, rad. */
export interface Gate {
  flag: number;
  offCentre?: number;
}

/**
 * Time for which a flag blocks the beam, exact without damping: from −flag/2 to flag/2 about the beam.
 *
 * @param amplitude    rad, in (|offCentre| + flag/2, π)
 * @param smallPeriod  T0, s, > 0
 * @returns            s; undefined when the flag does not get through the beam
 * @example blockedTime({ flag: 0.02 }, radians(10), 2 * Math.PI) // 0.114800
 */
export function blockedTime({ flag, offCentre = 0 }: Gate, amplitude: number, smallPeriod: number): number | undefined {
  mustBeAboveZero('blockedTime', { flag, smallPeriod });
  const [from, to] = [offCentre - flag / 2, offCentre + flag / 2];
  if (Math.max(Math.abs(from), Math.abs(to)) > amplitude) return undefined;
  return timeFromBottom(to, amplitude, smallPeriod) - timeFromBottom(from, amplitude, smallPeriod);
}

/** Speed of the flag at the lowest point over the distance from the pivot: 2 ω sin(A/2), rad/s. */
export function bottomSpeed(amplitude: number, smallPeriod: number): number {
  mustBeAboveZero('bottomSpeed', { smallPeriod });
  return ((4 * Math.PI) / smallPeriod) * sin(amplitude / 2);
}

/**
 * Relative error of flag width over blocked time as the speed at the bottom, to first order: −(ω dt)²/24.
 * Good to 1e-4 of the speed while (ω dt)² is below 0.3.
 */
export function widthBias(blockedTime_: number, smallPeriod: number): number {
  mustBeAboveZero('widthBias', { blockedTime: blockedTime_, smallPeriod });
  return -(((2 * Math.PI * blockedTime_) / smallPeriod) ** 2) / 24;
}

/**
 * Amplitude at which a flag blocks the beam for a time; exact without damping, where `amplitudeFromBlock`
 * is of first order in the width.
 *
 * @returns  rad; undefined when no swing is that fast or that slow
 * @example exactAmplitudeFromBlock({ flag: 0.02 }, 0.114800, 2 * Math.PI) // 0.174533, 10°
 */
export function exactAmplitudeFromBlock(gate: Gate, blockedTime_: number, smallPeriod: number): number | undefined {
  mustBeAboveZero('exactAmplitudeFromBlock', { blockedTime: blockedTime_ });
  // The blocked time only falls as the amplitude grows, so halving finds the one amplitude there is.
  let low = Math.abs(gate.offCentre ?? 0) + gate.flag / 2;
  let high = Math.PI * (1 - 1e-9);
  const longest = blockedTime(gate, low, smallPeriod);
  const shortest = blockedTime(gate, high, smallPeriod);
  if (longest === undefined || shortest === undefined) return undefined;
  if (blockedTime_ > longest || blockedTime_ < shortest) return undefined;
  while (high - low > 1e-15 * high) {
    const middle = (low + high) / 2;
    if (middle === low || middle === high) break;
    if (blockedTime(gate, middle, smallPeriod)! > blockedTime_) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

/**
 * The two intervals that alternate when the beam stands off the lowest point: T/2 ± 2 t(φ). Without
 * damping their sum is T whatever φ is.
 *
 * @param offCentre  rad, within the amplitude
 * @returns          s: round the far turning point, and round the near one
 */
export function passIntervals(
  offCentre: number,
  amplitude: number,
  smallPeriod: number,
): { long: number; short: number } {
  const half = (smallPeriod * periodRatio(amplitude)) / 2;
  const shift = 2 * timeFromBottom(Math.abs(offCentre), amplitude, smallPeriod);
  return { long: half + shift, short: half - shift };
}

/**
 * How far off the lowest point a beam or a mark stands, from the two intervals that alternate: the inverse
 * of `passIntervals` to first order in the amplitude, φ = A sin(π (long − short)/(2 T)).
 *
 * @returns  rad, without its side
 */
export function offCentreFrom({ long, short }: { long: number; short: number }, amplitude: number): number {
  mustBeAboveZero('offCentreFrom', { long, short, amplitude });
  return amplitude * sin((Math.PI * Math.abs(long - short)) / (2 * (long + short)));
}

/**
 * By how much timing on one edge alone falsifies T, s a swing: the edge passes half a flag before the middle,
 * and that lead grows as the amplitude falls. −(flag/2) |dA|/(ω A²) with dA the loss a swing.
 * The middle of both edges has no such error.
 */
export function edgeBias(flag: number, amplitude: number, lossPerSwing: number, smallPeriod: number): number {
  mustBeAboveZero('edgeBias', { flag, amplitude, smallPeriod });
  return -((flag / 2) * Math.abs(lossPerSwing) * smallPeriod) / (2 * Math.PI * amplitude ** 2);
}
