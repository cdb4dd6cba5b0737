import { plainLine } from '@shared/analysis/pictures/plainLine';
import type { Analysis } from '@shared/schemas/analysis';
import type { FlagCode } from '@shared/schemas/edit';
import type { Shape } from './markers';
import { msPlaces } from '@shared/units/msPlaces';

/** One mark on the observed-minus-calculated strip. */
export interface StripPoint {
  mark: number;
  /** Swings since the first mark; for a mark left out, where it would stand. */
  swing: number;
  time_s: number;
  lap_s: number | null;
  residual_ms: number | null;
  isLeftOut: boolean;
  /** Codes of the flags about this very mark. */
  flags: FlagCode[];
  isFlagOpen: boolean;
}

/** A message key with the numbers it names. */
export interface Finding {
  key: string;
  named: Record<string, number>;
}

/** Shape that stands for a flag at its mark, in the picture and beside its words. */
export const FLAG_SHAPES: Record<FlagCode, Shape> = {
  double: 'diamond',
  missed: 'square',
  late_first_mark: 'triangle',
  outlier: 'star',
  half_swings: 'plus',
  count_from_one: 'star',
  clock_gap: 'cross',
  cut_short: 'ring',
  chatter: 'cross',
  pause: 'square',
  off_centre: 'triangle',
  drift: 'plus',
  round_numbers: 'ring',
  implausible: 'star',
};

export function stripPoints(analysis: Analysis): StripPoint[] {
  const inForce = analysis.marks.filter((row) => row.swing !== null);
  return analysis.marks.map((row) => {
    const flags = analysis.flags.filter((flag) => flag.mark === row.mark);
    return {
      mark: row.mark,
      swing: row.swing ?? placeOf(row.time_s, inForce),
      time_s: row.time_s,
      lap_s: row.lap_s,
      residual_ms: row.residual_s === null ? null : row.residual_s * 1000,
      isLeftOut: row.swing === null,
      flags: flags.map((flag) => flag.code),
      isFlagOpen: flags.some((flag) => !flag.answered),
    };
  });
}

/** What the strip shows, in one sentence. */
export function stripFinding(analysis: Analysis): Finding {
  const points = stripPoints(analysis).filter((point) => point.residual_ms !== null);
  if (points.length === 0 || analysis.jitter_s === null) return { key: 'run.strip.nothing', named: {} };
  const ms = (seconds: number) => Number((1000 * seconds).toFixed(msPlaces(analysis.jitter_s)));
  const jitter_ms = ms(analysis.jitter_s);
  const flagged = points.filter((point) => point.isFlagOpen).length;
  if (flagged > 0) return { key: 'run.strip.flagged', named: { marks: points.length, jitter_ms, n: flagged } };
  const worst = points.reduce((a, b) => (Math.abs(b.residual_ms!) > Math.abs(a.residual_ms!) ? b : a));
  const named = { marks: points.length, jitter_ms };
  if (Math.abs(worst.residual_ms!) <= OUTSIDE_BAND * analysis.jitter_s * 1000) return { key: 'run.strip.even', named };
  return {
    key: worst.residual_ms! > 0 ? 'run.strip.late' : 'run.strip.early',
    named: { ...named, mark: worst.mark, off_ms: ms(Math.abs(worst.residual_ms!) / 1000) },
  };
}

/** Where the plain line, which knows of no amplitude, expects each mark against the motion, ms, by mark. */
export function plainLine_ms(analysis: Analysis): Map<number, number> {
  return new Map(plainLine(analysis)?.map(({ mark, bend }) => [mark, bend * 1000]));
}

/** How far the plain line bows away from the motion, ms; null when there is nothing to compare. */
export function largestBow_ms(bows: Map<number, number>): number | null {
  return bows.size === 0 ? null : Math.max(...[...bows.values()].map(Math.abs));
}

/** Half height of the strip, ms: holds every residual, the ±2 s.d. band, and the bow if shown, with room to spare. */
export function stripReach_ms(points: StripPoint[], jitter_s: number | null, bow_ms = 0): number {
  const largest = Math.max(bow_ms, ...points.map((point) => Math.abs(point.residual_ms ?? 0)));
  const band = 2.4 * (jitter_s ?? 0) * 1000;
  // Hands are never shown wilder than they are; a gate's scatter is a thousand times finer and has a scale of its own.
  return 1.15 * Math.max(largest, band, msPlaces(jitter_s) === 0 ? 5 : 2 * band);
}

/** Beyond so many s.d. a mark is worth naming: one good mark in a hundred lies out there. */
const OUTSIDE_BAND = 2.6;

/** Where a mark that is left out would stand, from the two marks in force nearest to it. */
function placeOf(time_s: number, inForce: Analysis['marks']): number {
  const after = inForce.findIndex((row) => row.time_s >= time_s);
  const at = after === -1 ? inForce.length - 1 : Math.max(after, 1);
  const [left, right] = [inForce[at - 1], inForce[at]];
  if (!left || !right) return inForce[0]?.swing ?? 0;
  const share = (time_s - left.time_s) / (right.time_s - left.time_s);
  return left.swing! + share * (right.swing! - left.swing!);
}
