import type { AmplitudePoint } from '../../physics/amplitudeCurve';
import { asin } from '../../physics/elementary';
import { averagedAt, averagedMotion } from '../../physics/motion/averagedMotion';
import type { Analysis } from '../../schemas/analysis';
import { hypot } from '../../statistics/hypot';
import type { RunView } from '../../timing/runView';
import { blockAmplitudes, FLAG_WIDTH_U } from '../blockAmplitudes';
import type { MotionFit } from '../motion/motionFit';
import { dampingOf } from '../motion/motionUnknowns';
import { findMotion } from '../motionMethod';
import { readAmplitudes } from '../readAmplitudes';
import { amplitudeAtSwing, fittedMotion } from './fittedMotion';

/** How the amplitude fell, in rad over swings since the first mark in force. */
export interface AmplitudeDecay {
  /** The fitted motion's amplitude with its standard uncertainty; empty without a motion. */
  curve: AmplitudePoint[];
  readings: DecayReading[];
}

/** Read by eye, or worked out from how long the blocks of a gate lasted. */
export type DecayReading = AmplitudePoint & { from: 'eye' | 'blocks' };

/** Rows of a curve, whatever the length of the run. */
const MOST_ROWS = 120;

/**
 * The decay curve of an analysis, its band, and the readings beside it.
 *
 * The curve is the analysis' own. Its uncertainty is that of the same data fitted by the averaged law, which
 * takes a fraction of the time and gives amplitudes the same uncertainty to a few per cent.
 *
 * @param view  of the same run with the same edits
 */
export function amplitudeDecay(analysis: Analysis, view: RunView): AmplitudeDecay {
  const motion = fittedMotion(analysis);
  const byEye = readAmplitudes(view.amplitudes).map((point) => ({ ...point, from: 'eye' as const }));
  const readings = [...byEye, ...blockReadings(analysis, view)].sort((a, b) => a.swing - b.swing);
  if (!motion) return { curve: [], readings };
  const halves = Math.max(1, Math.round(2 * (motion.last - motion.from)));
  const stride = Math.ceil(halves / MOST_ROWS);
  const rows = Math.ceil(halves / stride);
  const swings = Array.from({ length: rows + 1 }, (_, i) => Math.min(motion.from + (i * stride) / 2, motion.last));
  const us = uncertainties(view, swings);
  const curve = swings.map((swing, i) => ({ swing, amplitude: amplitudeAtSwing(motion, swing), u: us[i] ?? 0 }));
  return { curve, readings };
}

/** Standard uncertainty of the amplitude at some swings, rad, from the covariance of the fit. */
function uncertainties(view: RunView, swings: number[]): number[] {
  const fit = findMotion(view, 'averaged')?.fit;
  if (!fit) return [];
  const { values, places, covariance } = fit;
  const unknowns = [places.amplitude, ...places.losses];
  const along = (moved: number[]) => amplitudesOf(fit, moved, swings);
  const base = along(values);
  const slopes = unknowns.map((place) => {
    const amplitude = values[place]!;
    const by = place === places.amplitude ? -1e-4 * Math.min(amplitude, Math.PI - amplitude) : 1e-5 + 1e-3 * amplitude;
    const moved = along(values.map((v, i) => (i === place ? v + by : v)));
    return moved.map((a, i) => (a - base[i]!) / by);
  });
  return swings.map((_, row) => {
    let variance = 0;
    unknowns.forEach((a, i) =>
      unknowns.forEach((b, j) => {
        variance += slopes[i]![row]! * slopes[j]![row]! * covariance[a]![b]!;
      }),
    );
    return Math.sqrt(Math.max(variance, 0));
  });
}

function amplitudesOf({ places, rates, from }: MotionFit, values: number[], swings: number[]): number[] {
  const table = averagedMotion(
    values[places.amplitude]!,
    dampingOf(values, places, rates),
    Math.max(swings.at(-1)! - from, 1),
  );
  return swings.map((swing) => averagedAt(table, swing - from).amplitude);
}

/** Amplitudes from block times, their bars with the share of the flag's width. */
function blockReadings({ motion, small_period_s }: Analysis, view: RunView): DecayReading[] {
  if (view.capture.kind !== 'gate' || !motion || !small_period_s) return [];
  const { gate_angle_deg, release_deg } = motion;
  const share = gate_angle_deg ? Math.min(Math.abs(gate_angle_deg.value) / release_deg.value, 0.5) : 0;
  const limp = (small_period_s.value / Math.PI) * asin(share);
  const byWidth = FLAG_WIDTH_U / ((view.capture.flag_width_um ?? Infinity) * 1e-6);
  return blockAmplitudes(view, small_period_s.value, limp).map((point) => ({
    ...point,
    u: hypot(point.u, byWidth * point.amplitude),
    from: 'blocks',
  }));
}
