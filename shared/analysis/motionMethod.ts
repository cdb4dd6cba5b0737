import type { BudgetLine } from '../schemas/analysis';
import { fitLine } from '../statistics/fitLine';
import { semidefiniteRoot } from '../statistics/invert';
import { slopeUncertainty } from '../statistics/slopeUncertainty';
import type { RunView } from '../timing/runView';
import { lineMethod } from './lineMethod';
import type { Fit, Method } from './method';
import { LOSS_SETS } from './motion/averageLosses';
import { fitMotion } from './motion/fitMotion';
import { motionData, type MotionData } from './motion/motionData';
import type { MotionFit } from './motion/motionFit';
import { losesMuch } from './motion/motionUnknowns';
import type { MotionEvent } from './motion/predictMotion';
import { startMotion } from './motion/startMotion';
import { clockShare, HAND_U } from './timingShares';
import { exp } from '../physics/elementary';
import { hypot } from '../statistics/hypot';

/**
 * Method 'motion-2'. The pendulum's equation of motion, at full amplitude and with three terms of
 * damping, is fitted to marks, amplitude readings and block times; T0 is one of its unknowns. Where the
 * run does not hold enough for a motion it says what 'line-1' says.
 */
export const motionMethod: Method = {
  id: 'motion-2',
  fit(view) {
    const found = findMotion(view);
    return found ? fitOf(view, found) : lineMethod.fit(view);
  },
};

/** Longest run to integrate, swings; beyond it the averaged law is as good as the marks. */
const MOST_INTEGRATED = 250;
/** s. Of one gate edge, when the run has too few to tell. Common practice, no source. */
const GATE_U = 1e-4;
const FEWEST_SPARE = 3;

interface Found {
  data: MotionData;
  fit: MotionFit;
  decayKnown: boolean;
  /** By how much T0 is to be moved, and its uncertainty, because it is not known which event was marked, s. */
  doubt: { shift: number; u: number };
}

export function findMotion(view: RunView, path: MotionFit['path'] = 'integrated'): Found | undefined {
  const data = motionData(view);
  if (!data) return undefined;
  const last = data.swings.at(-1)!;
  const from = Math.min(0, Math.floor(2 * Math.min(0, ...data.readings.map((reading) => reading.swing))) / 2);
  const begin = startMotion(data, from);
  if (!begin) return undefined;
  const leastJitter = Math.max(view.readingStep / Math.sqrt(12), 1e-7);
  const usualJitter = data.gate ? Math.max(GATE_U, leastJitter) : HAND_U;
  const events: MotionEvent[] = data.gate ? ['pass'] : ['pass', 'turn'];
  const fitAs = (event: MotionEvent, by: MotionFit['path'], near?: MotionFit) =>
    fitMotion(data, begin, from, [0, last], { event, path: by, usualJitter, leastJitter, near });
  let fits: MotionFit[] = [];
  for (const event of events) {
    const fit = fitAs(event, 'averaged', fits[0]);
    if (fit) fits.push(fit);
  }
  if (path === 'integrated' && last - from <= MOST_INTEGRATED) {
    // Where the averaged law is a poor judge of which event was marked, both are integrated.
    const isExtreme = fits.some(({ values, places, rates }) => losesMuch(values, places, rates));
    fits.sort(byLikeliness);
    fits = fits.map((fit, i) => (i === 0 || isExtreme ? (fitAs(fit.event, path, fit) ?? fit) : fit));
    if (isExtreme) fits.sort(byLikeliness);
  } else fits.sort(byLikeliness);
  const [fit, other] = fits;
  if (!fit || !(fit.values[fit.places.period]! > 0)) return undefined;
  return { data, fit, decayKnown: begin.decayKnown, doubt: other ? doubtOfEvent(fit, other) : { shift: 0, u: 0 } };
}

function byLikeliness(a: MotionFit, b: MotionFit): number {
  return a.unlikeliness - b.unlikeliness;
}

function doubtOfEvent(best: MotionFit, other: MotionFit) {
  const odds = exp((best.unlikeliness - other.unlikeliness) / 2);
  const share = odds / (1 + odds);
  const apart = other.values[other.places.period]! - best.values[best.places.period]!;
  return { shift: share * apart, u: Math.sqrt(share * (1 - share)) * Math.abs(apart) };
}

function fitOf(view: RunView, { data, fit, decayKnown, doubt }: Found): Fit {
  const { places, values } = fit;
  const smallPeriod = values[places.period]! + doubt.shift;
  const timing = timingOf(view, data, fit);
  const others: BudgetLine[] = [
    { term: 'amplitude', type: 'B', u: amplitudeShare(data, fit, places.period), dof: null },
    { term: 'decay', type: 'B', u: hypot(decayShare(data, fit, places.period), doubt.u), dof: null },
  ];
  const plain = fitLine(data.swings, data.times, data.isOdd);
  const last = data.swings.length - 1;
  const elapsed = data.swings.map((_, i) => (fit.prediction.times[i]! - fit.prediction.times[0]!) / (2 * Math.PI));
  const ratio = Math.max(elapsed[last]! / (data.swings[last]! - data.swings[0]!), 1);
  const shares = [...timing.shares, clockShare(smallPeriod), ...others];
  const period = plain?.slope ?? smallPeriod * ratio;
  return {
    period: {
      value: period,
      shares: [...timing.shares.map((share) => ({ ...share, u: share.u * ratio })), clockShare(period)],
    },
    smallPeriod: { value: smallPeriod, shares },
    amplitude: {
      ratio,
      start: amplitudeAt(data, fit, 0),
      end: amplitudeAt(data, fit, 1),
      decayKnown,
    },
    jitter: timing.jitter,
    lag1: timing.lag1,
    elapsed,
    residuals: fit.residuals,
    basis: timing.basis,
    missing: decayKnown ? [] : ['end_amplitude'],
    motion: motionOf(fit),
  };
}

/** How much each mark counts in an unknown. */
function markWeights(fit: MotionFit, place: number): number[] {
  const row = fit.within[place]!;
  return fit.residuals.map((_, i) => {
    let sum = 0;
    for (let k = 0; k < row.length; k += 1) sum += row[k]! * fit.slopes.times[k]![i]!;
    return sum / fit.jitter ** 2;
  });
}

function timingOf(view: RunView, data: MotionData, fit: MotionFit) {
  const slopeWeights = markWeights(fit, fit.places.period);
  const size = hypot(...slopeWeights);
  const lower = semidefiniteRoot(fit.within);
  const basis = lower.map((_, k) =>
    fit.residuals.map((__, i) => {
      let sum = 0;
      for (let j = k; j < lower.length; j += 1) sum += fit.slopes.times[j]![i]! * lower[j]![k]!;
      return sum / fit.jitter;
    }),
  );
  const found = slopeUncertainty({ residuals: fit.residuals, slopeWeights, basis });
  const byBlocks = blockShare(fit, fit.places.period);
  const isFew = fit.free < FEWEST_SPARE;
  const usual = size * (data.gate ? GATE_U : HAND_U);
  const reading: BudgetLine = { term: 'reading', type: 'B', u: (size * view.readingStep) / Math.sqrt(12), dof: null };
  const byScatter: BudgetLine[] = found
    ? [{ term: 'timing', type: 'A', u: hypot(found.u, byBlocks), dof: found.dof }]
    : [];
  const isUsual = isFew && !(found && found.u > usual);
  const shares: BudgetLine[] = isUsual
    ? [{ term: data.gate ? 'timing' : 'hand', type: 'B', u: hypot(usual, byBlocks), dof: null }]
    : byScatter;
  return { shares: [...shares, reading], jitter: found?.jitter ?? null, lag1: found?.lag1 ?? null, basis };
}

function blockShare(fit: MotionFit, place: number): number {
  const row = fit.within[place]!;
  const counted = fit.blockWeights.map((weight, i) => {
    let sum = 0;
    for (let k = 0; k < row.length; k += 1) sum += row[k]! * fit.slopes.blocked[k]![i]!;
    return sum * weight * fit.blockJitter;
  });
  return hypot(...counted);
}

function amplitudeShare(data: MotionData, fit: MotionFit, place: number): number {
  const row = fit.within[place]!;
  const counted = data.readings.map(({ u }, i) => {
    const sum = row.reduce((s, c, k) => s + c * fit.slopes.amplitudes[k]![i]!, 0);
    return sum / (u * fit.readingFactor);
  });
  const byFlag = fit.places.flagError < 0 ? 0 : row[fit.places.flagError]! / data.gate!.flagU;
  return hypot(...counted, byFlag);
}

/** What is left of the whole when marks, blocks and readings have had their part: the law of decay is not known. */
function decayShare(data: MotionData, fit: MotionFit, place: number): number {
  const byMarks = hypot(...markWeights(fit, place)) * fit.jitter;
  const known = hypot(byMarks, blockShare(fit, place), amplitudeShare(data, fit, place));
  return Math.sqrt(Math.max(fit.covariance[place]![place]! - known ** 2, 0));
}

function motionOf(fit: MotionFit): Fit['motion'] {
  const { places, values, covariance, rates, chances } = fit;
  const measured = (place: number, per = 1) => ({
    value: values[place]! / per,
    u: Math.sqrt(Math.max(covariance[place]![place]!, 0)) / per,
  });
  const angular = (2 * Math.PI) / values[places.period]!;
  const acts = (k: number) =>
    LOSS_SETS.reduce((sum, set, m) => sum + (set.some((one) => one === k) ? chances[m]! : 0), 0);
  return {
    event: fit.event,
    path: fit.path,
    converged: fit.converged,
    release: { swing: fit.from, time: values[places.start]!, amplitude: measured(places.amplitude) },
    viscous: measured(places.losses[0], rates[0] / angular),
    quadratic: measured(places.losses[1], rates[1]),
    dry: measured(places.losses[2], rates[2]),
    chances: { viscous: acts(0), quadratic: acts(1), dry: acts(2) },
    gateAngle: places.gateAngle < 0 ? null : measured(places.gateAngle),
  };
}

/** At the first mark's swing (0) or the last one's (1). */
function amplitudeAt(data: MotionData, fit: MotionFit, probe: 0 | 1) {
  const i = data.readings.length + probe;
  const slopes = fit.slopes.amplitudes.map((column) => column[i]!);
  const variance = slopes.reduce(
    (sum, a, j) => sum + a * slopes.reduce((s, b, k) => s + b * fit.covariance[j]![k]!, 0),
    0,
  );
  return { value: fit.prediction.amplitudes[i]!, u: Math.sqrt(Math.max(variance, 0)) };
}
