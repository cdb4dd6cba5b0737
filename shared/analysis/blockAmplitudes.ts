import type { AmplitudePoint } from '../physics/amplitudeCurve';
import { amplitudeFromBlock } from '../physics/blockSpeed';
import { quantile } from '../statistics/quantile';
import type { RunView } from '../timing/runView';
import { sin } from '../physics/elementary';
import { hypot } from '../statistics/hypot';

/** Blocks are put together into at most this many groups, each with its median: a chattering block then does no harm. */
const MOST_GROUPS = 24;
/** How well a flag's width is known, m: to ±0.2 mm. Common practice, no source. */
export const FLAG_WIDTH_U = 0.2e-3 / Math.sqrt(3);

/**
 * Amplitudes from block times, when the flag's width and distance are known.
 *
 * @param view         a gate run
 * @param smallPeriod  T0 as known so far, s
 * @param limp         by how much odd passes come later than half way, s
 * @returns            one point a group of blocks, their u without the share of the flag's width; empty
 *                     when the run has no flag or is not from a gate
 */
export function blockAmplitudes(view: RunView, smallPeriod: number, limp: number): AmplitudePoint[] {
  const { capture } = view;
  if (capture.kind !== 'gate' || !capture.flag_width_um || !capture.flag_distance_um) return [];
  const flag = capture.flag_width_um / capture.flag_distance_um;
  const blocks = view.marks
    .filter((mark) => mark.swing !== null)
    .map((mark) => ({ swing: mark.swing!, blockedTime: mark.blockedTime! }));
  const size = Math.max(Math.ceil(blocks.length / MOST_GROUPS), Math.min(4, blocks.length));
  const points: AmplitudePoint[] = [];
  for (let i = 0; i + size <= blocks.length; i += size) {
    const group = blocks.slice(i, i + size);
    const times = group.map((block) => block.blockedTime);
    const middle = quantile(times, 0.5);
    const centred = amplitudeFromBlock(flag, middle, smallPeriod);
    if (centred === undefined) continue;
    // Half periods differ by (4/ω) asin(φ/A) when the gate stands at angle φ.
    const offCentre = centred * sin((Math.PI * Math.min(Math.abs(limp), smallPeriod / 4)) / smallPeriod);
    const amplitude = amplitudeFromBlock(flag, middle, smallPeriod, offCentre);
    if (amplitude === undefined) continue;
    const scatter =
      1.4826 *
      quantile(
        times.map((t) => Math.abs(t - middle)),
        0.5,
      );
    const step = view.readingStep / Math.sqrt(6);
    const u = (amplitude * hypot(scatter, step)) / middle / Math.sqrt(size);
    points.push({ swing: group.reduce((sum, block) => sum + block.swing, 0) / size, amplitude, u });
  }
  return points;
}
