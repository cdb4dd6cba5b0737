import type { AmplitudePoint } from '../physics/amplitudeCurve';
import { averagedAt, averagedMotion, slopes } from '../physics/motion/averagedMotion';
import type { Measured } from '../schemas/common';
import { leastSquares } from '../statistics/leastSquares';

export const LAWS = ['viscous', 'quadratic', 'dry'] as const;
export type DampingLaw = (typeof LAWS)[number];

export interface LawShare {
  law: DampingLaw;
  /** What it takes in one swing at the amplitude asked about, rad. */
  lossPerSwing: number;
  /** Of all that is lost. */
  share: number;
  /** How many standard uncertainties the term lies above 0. */
  sigma: number;
}

export interface LawVerdict {
  /** null when the data do not tell. */
  law: DampingLaw | null;
  /**
   * only_one: the others do not show above their uncertainty · largest: several show, this one takes most ·
   * none_shows: no term stands out of its uncertainty
   */
  why: 'only_one' | 'largest' | 'none_shows';
  /** Largest loss first. */
  shares: LawShare[];
}

/** Standard uncertainties a term must lie above 0 to count as seen. Common practice. */
const SHOWS = 2;

/**
 * Which law of damping a motion fit speaks for, at an amplitude: what each fitted term takes a swing there.
 *
 * @param terms      as the motion fit gives them, pure numbers with their standard uncertainties
 * @param amplitude  rad, in (0, π)
 */
export function preferredLaw(terms: Record<DampingLaw, Measured>, amplitude: number): LawVerdict {
  const losses = LAWS.map((law) => lossOf(law, terms[law].value, amplitude));
  const total = losses.reduce((sum, loss) => sum + loss, 0);
  const shares = LAWS.map((law, i): LawShare => {
    const { value, u } = terms[law];
    const sigma = value === 0 ? 0 : value / u;
    return { law, lossPerSwing: losses[i]!, share: total === 0 ? 0 : losses[i]! / total, sigma };
  }).sort((a, b) => b.lossPerSwing - a.lossPerSwing);
  const seen = shares.filter((share) => share.sigma >= SHOWS);
  if (seen.length === 0) return { law: null, why: 'none_shows', shares };
  return { law: seen[0]!.law, why: seen.length === 1 ? 'only_one' : 'largest', shares };
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
