import type { AmplitudePoint } from '../physics/amplitudeCurve';
import { averagedAt, averagedMotion, slopes } from '../physics/motion/averagedMotion';
import type { Damping } from '../physics/motion/damping';
import type { Measured } from '../schemas/common';
import { leastSquares } from '../statistics/leastSquares';

export const LAWS = ['viscous', 'quadratic', 'dry'] as const;
export type DampingLaw = (typeof LAWS)[number];

/** What a motion fit says of the damping: the part of `Motion` in the analysis that is about it. */
export interface DampingFound {
  gamma_per_s: Measured;
  beta: Measured;
  c: Measured;
  /** How likely each term is to act, in [0, 1]. */
  chances: Record<DampingLaw, number>;
  /** The one that acts alone, if that is more likely than not. */
  law: DampingLaw | 'mixed' | 'not_known';
}

export interface LawShare {
  law: DampingLaw;
  /** What it takes in one swing at the amplitude asked about, rad. */
  lossPerSwing: number;
  /** Of all that is lost. */
  share: number;
  chance: number;
}

export interface LawVerdict {
  /** null when the data do not tell. */
  law: DampingLaw | null;
  /** alone: one term acts · largest: several do, and this one takes most at this amplitude · not_known: the run does not tell */
  why: 'alone' | 'largest' | 'not_known';
  /** Largest loss first. */
  shares: LawShare[];
}

/** Damping as pure numbers, as the equation of motion takes it. @param smallPeriod  T0, s */
export function dampingFrom({ gamma_per_s, beta, c }: DampingFound, smallPeriod: number): Damping {
  return { viscous: (gamma_per_s.value * smallPeriod) / (2 * Math.PI), quadratic: beta.value, dry: c.value };
}

/**
 * The law of decay a motion fit speaks for, at an amplitude, and what each term takes a swing there.
 *
 * @param found        by the motion fit
 * @param smallPeriod  T0, s, > 0
 * @param amplitude    rad, in (0, π)
 */
export function preferredLaw(found: DampingFound, smallPeriod: number, amplitude: number): LawVerdict {
  const damping = dampingFrom(found, smallPeriod);
  const losses = LAWS.map((law) => lossOf(law, damping[law], amplitude));
  const total = losses.reduce((sum, loss) => sum + loss, 0);
  const shares = LAWS.map((law, i): LawShare => {
    const share = total === 0 ? 0 : losses[i]! / total;
    return { law, lossPerSwing: losses[i]!, share, chance: found.chances[law] };
  }).sort((a, b) => b.lossPerSwing - a.lossPerSwing);
  if (found.law === 'not_known') return { law: null, why: 'not_known', shares };
  if (found.law !== 'mixed') return { law: found.law, why: 'alone', shares };
  return { law: shares[0]!.law, why: 'largest', shares };
}

export interface LawFit {
  law: DampingLaw;
  /** The law's own constant, a pure number as in `Damping`. */
  constant: Measured;
  /** Amplitude at the first reading, rad. */
  start: Measured;
  chiSquare: number;
}

export interface LawFromReadings {
  law: DampingLaw | null;
  /** best: it fits better than the next by enough · not_told_apart: two fit about as well · none_fits: the best is far off too */
  why: 'best' | 'not_told_apart' | 'none_fits';
  /** Best first. */
  fits: LawFit[];
  dof: number;
}

/** χ² the next best must be worse by: odds of seven to one for independent normal readings. */
const WORSE_BY = 4;
/** χ² per degree of freedom from which not even the best counts as a fit. */
const FAR_OFF = 4;

/**
 * Which single law follows a set of amplitude readings best, each fitted with its large-angle factors.
 *
 * @param readings  amplitudes in (0, π) with standard uncertainties above 0
 * @returns         undefined with fewer than three readings at different swings, or when nothing is lost
 */
export function lawFromReadings(readings: readonly AmplitudePoint[]): LawFromReadings | undefined {
  const points = [...readings].sort((a, b) => a.swing - b.swing);
  const [first, last] = [points[0], points.at(-1)];
  if (new Set(points.map((p) => p.swing)).size < 3 || !first || !last) return undefined;
  if (!(last.amplitude < first.amplitude)) return undefined;
  const fits = LAWS.flatMap((law) => fitLaw(law, points) ?? []).sort((a, b) => a.chiSquare - b.chiSquare);
  const [best, next] = fits;
  if (!best) return undefined;
  const dof = points.length - 2;
  if (best.chiSquare > FAR_OFF * dof) return { law: null, why: 'none_fits', fits, dof };
  const isClear = !next || next.chiSquare - best.chiSquare >= WORSE_BY;
  return { law: isClear ? best.law : null, why: isClear ? 'best' : 'not_told_apart', fits, dof };
}

function fitLaw(law: DampingLaw, points: AmplitudePoint[]): LawFit | undefined {
  const [first, last] = [points[0]!, points.at(-1)!];
  const swings = last.swing - first.swing;
  const middle = (first.amplitude + last.amplitude) / 2;
  // Loss per swing over that of a constant of 1 at the middle amplitude: near enough to start from.
  const guess = (first.amplitude - last.amplitude) / swings / lossOf(law, 1, middle);
  const fit = leastSquares(
    ([start, constant]) => {
      const table = averagedMotion(start!, dampingOf(law, constant! * guess), swings);
      return points.map((p) => (averagedAt(table, p.swing - first.swing).amplitude - p.amplitude) / p.u);
    },
    [first.amplitude, 1],
    ([start, constant]) => [Math.min(Math.max(start!, 1e-4), 3.1), Math.max(constant!, 0)],
  );
  if (!fit) return undefined;
  const [start, constant] = fit.unknowns;
  const u = (i: number) => Math.sqrt(fit.covariance[i]![i]!);
  return {
    law,
    constant: { value: constant! * guess, u: u(1) * guess },
    start: { value: start!, u: u(0) },
    chiSquare: fit.chiSquare,
  };
}

function lossOf(law: DampingLaw, constant: number, amplitude: number): number {
  return -slopes(amplitude, dampingOf(law, constant))[0];
}

function dampingOf(law: DampingLaw, constant: number) {
  return { viscous: 0, quadratic: 0, dry: 0, [law]: constant };
}
