import type { BudgetLine } from '../schemas/analysis';
import { amplitudeAt, type AmplitudePoint } from '../physics/amplitudeCurve';
import { fitAmplitudes, type AmplitudeFit, type CurveDoubt } from '../physics/fitAmplitudes';
import { meanPeriodRatio, smallPeriodsElapsed } from '../physics/meanPeriodRatio';
import { fitLine, type LineFit } from '../statistics/fitLine';
import type { RunView } from '../timing/runView';
import { blockAmplitudes, FLAG_WIDTH_U } from './blockAmplitudes';
import type { Fit, Method } from './method';
import { readAmplitudes } from './readAmplitudes';
import { clockShare, timingShares } from './timingShares';
import { hypot } from '../statistics/hypot';

/**
 * Method 'line-1'. T is the slope of the straight line through all marks against the swing number. T0
 * is the slope against the sum of T/T0 along an amplitude that falls between its readings. Passes of
 * the two directions share the slope and have a constant of their own, so a mark off centre does no harm.
 *
 * It averages the amplitude over each swing and does not solve the motion: where the amplitude falls by
 * a tenth or more in one swing, or starts above 90°, its T0 is off by more than taps show.
 */
export const lineMethod: Method = {
  id: 'line-1',
  fit(view) {
    const line = view.capture.kind === 'keyed_total' ? keyedTotal(view) : throughMarks(view);
    if (!line) return { ...NOTHING, missing: view.swings === null && view.marks.length === 0 ? ['swings'] : ['marks'] };
    const found = correctForAmplitude(view, line);
    const plain = line.fit(line.swings)!;
    if (!found) {
      return { ...NOTHING, ...periodOnly(view, plain), elapsed: line.swings, missing: ['amplitude'] };
    }
    const { amplitudes, corrected, elapsed } = found;
    const last = line.swings.at(-1)!;
    const ratio = meanPeriodRatio(amplitudes.curve, 0, last);
    const scatter = timingShares(view, corrected);
    const doubts = curveDoubts(
      amplitudes.doubts,
      (curve) => line.fit(smallPeriodsElapsed(curve, line.swings))!.slope,
      corrected.slope,
    );
    return {
      // Curved residuals of the plain line are the falling amplitude, not jitter: T takes its scatter from the better fit.
      period: {
        value: plain.slope,
        shares: [...scatter.shares.map((s) => ({ ...s, u: s.u * ratio })), clockShare(plain.slope)],
      },
      smallPeriod: { value: corrected.slope, shares: [...scatter.shares, clockShare(corrected.slope), ...doubts] },
      amplitude: {
        ratio,
        start: amplitudeWithU(amplitudes, 0),
        end: amplitudeWithU(amplitudes, last),
        decayKnown: amplitudes.decayKnown,
      },
      jitter: scatter.jitter,
      lag1: scatter.lag1,
      elapsed,
      residuals: corrected.residuals,
      basis: corrected.basis,
      missing: amplitudes.decayKnown ? [] : ['end_amplitude'],
      motion: null,
    };
  },
};

const NOTHING: Fit = {
  period: null,
  smallPeriod: null,
  amplitude: null,
  jitter: null,
  lag1: null,
  elapsed: [],
  residuals: [],
  basis: [],
  missing: [],
  motion: null,
};
/** The amplitudes from a gate need T0, and T0 needs them; each turn brings the factor A²/8 or less. */
const GATE_TURNS = 8;
/** Relative change of T0 below which another turn says nothing. */
const GATE_SETTLED = 1e-12;

/** Swings of the marks in force, and the line through them against any column as long. */
interface Line {
  swings: number[];
  fit(column: number[]): LineFit | undefined;
}

function throughMarks(view: RunView): Line | undefined {
  const used = view.marks.filter((mark) => mark.swing !== null);
  const times = used.map((mark) => mark.time);
  const swings = used.map((mark) => mark.swing!);
  const isOdd =
    view.swingsPerMark === 0.5 && used.length > 2 ? swings.map((n) => Math.round(2 * n) % 2 === 1) : undefined;
  const hasBoth = isOdd?.includes(true) && isOdd.filter((odd) => !odd).length > 1;
  // Two blocks of a gate are one half swing, which tells nothing while the gate may stand off centre.
  if (view.capture.kind === 'gate' && !hasBoth) return undefined;
  const fit = (column: number[]) => fitLine(column, times, hasBoth ? isOdd : undefined);
  return fit(swings) && { swings, fit };
}

function keyedTotal(view: RunView): Line | undefined {
  if (view.swings === null) return undefined;
  const swings = [0, view.swings];
  return { swings, fit: (column) => fitLine(column, [0, view.duration]) };
}

function periodOnly(view: RunView, plain: LineFit): Partial<Fit> {
  const scatter = timingShares(view, plain);
  return {
    period: { value: plain.slope, shares: [...scatter.shares, clockShare(plain.slope)] },
    jitter: scatter.jitter,
    lag1: scatter.lag1,
    residuals: plain.residuals,
    basis: plain.basis,
  };
}

function correctForAmplitude(view: RunView, line: Line) {
  const plain = line.fit(line.swings)!;
  const withPoints = (points: AmplitudePoint[]) => {
    const amplitudes = fitAmplitudes(points);
    if (!amplitudes) return undefined;
    const elapsed = smallPeriodsElapsed(amplitudes.curve, line.swings);
    const corrected = line.fit(elapsed);
    return corrected && { amplitudes, elapsed, corrected };
  };
  let found: ReturnType<typeof withPoints>;
  let smallPeriod = plain.slope;
  for (let turn = 0; turn < GATE_TURNS; turn += 1) {
    const next = withPoints(blockAmplitudes(view, smallPeriod, (found?.corrected ?? plain).offset));
    if (!next) break;
    found = next;
    const isSettled = Math.abs(next.corrected.slope - smallPeriod) <= GATE_SETTLED * smallPeriod;
    smallPeriod = next.corrected.slope;
    if (isSettled) break;
  }
  if (found) return { ...found, amplitudes: withFlagWidth(view, found.amplitudes) };
  return withPoints(readAmplitudes(view.amplitudes));
}

/** All speeds share the flag, so its width moves them together. */
function withFlagWidth(view: RunView, fit: AmplitudeFit): AmplitudeFit {
  if (view.capture.kind !== 'gate') return fit;
  const share = FLAG_WIDTH_U / ((view.capture.flag_width_um ?? Infinity) * 1e-6);
  const curves = [1 + share, 1 / (1 + share)].map((by) => ({
    ...fit.curve,
    first: fit.curve.first * by,
    last: fit.curve.last * by,
  }));
  return { ...fit, doubts: [...fit.doubts, { term: 'amplitude', curves, weight: 1 }] };
}

/** What the doubts about the amplitude bring to a result, one line a term. */
function curveDoubts(
  doubts: CurveDoubt[],
  of: (curve: CurveDoubt['curves'][number]) => number,
  best: number,
): BudgetLine[] {
  return (['amplitude', 'decay'] as const).flatMap((term): BudgetLine[] => {
    const own = doubts.filter((doubt) => doubt.term === term);
    if (own.length === 0) return [];
    return [{ term, type: 'B', u: hypot(...own.map((doubt) => effect(doubt, of, best))), dof: null }];
  });
}

function effect(
  { curves, weight }: CurveDoubt,
  of: (curve: CurveDoubt['curves'][number]) => number,
  best: number,
): number {
  const [a, b] = curves.map(of);
  return weight * (b === undefined ? Math.abs(a! - best) : Math.abs(a! - b) / 2);
}

function amplitudeWithU({ curve, doubts }: AmplitudeFit, swing: number) {
  const value = amplitudeAt(curve, swing);
  return { value, u: hypot(...doubts.map((doubt) => effect(doubt, (c) => amplitudeAt(c, swing), value))) };
}
