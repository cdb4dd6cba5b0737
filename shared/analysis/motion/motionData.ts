import type { AmplitudePoint } from '../../physics/amplitudeCurve';
import type { RunView } from '../../timing/runView';
import { readAmplitudes } from '../readAmplitudes';

/** What a motion is fitted to. Times in s, angles in rad, swings from the first mark in force. */
export interface MotionData {
  swings: number[];
  times: number[];
  /** Which marks are passes the other way; undefined with marks of one kind. */
  isOdd: boolean[] | undefined;
  readings: AmplitudePoint[];
  gate: GateData | undefined;
  /** A keyed total is two instants. */
  isKeyed: boolean;
}

/** A beam that is broken twice a swing. */
export interface GateData {
  /** Blocked times, s, one a mark; undefined when the flag's size is not known. */
  blocked: number[] | undefined;
  /** Angular width of the flag, rad; 0 when not known. */
  flag: number;
  /** Standard uncertainty of that width, as a share of it. */
  flagU: number;
}

/** How well a flag's width is known, m: to ±0.2 mm. Common practice, no source. */
const FLAG_WIDTH_U = 0.2e-3 / Math.sqrt(3);
/** Readings this many swings outside the marks say nothing about them. */
const FARTHEST_BEFORE = 50;
const FARTHEST_AFTER = 200;
/** rad. A reading cannot be better than this, whatever was entered. */
const LEAST_U = 1e-6;

/**
 * @returns undefined when the marks do not fix a period: fewer than two, or for a gate, which may stand
 *          off centre, fewer than three
 */
export function motionData(view: RunView): MotionData | undefined {
  const { capture } = view;
  const used = view.marks.filter((mark) => mark.swing !== null);
  const isKeyed = capture.kind === 'keyed_total';
  if (isKeyed && view.swings === null) return undefined;
  const swings = isKeyed ? [0, view.swings!] : used.map((mark) => mark.swing!);
  const times = isKeyed ? [0, view.duration] : used.map((mark) => mark.time);
  if (swings.length < (capture.kind === 'gate' ? 3 : 2)) return undefined;
  const last = swings.at(-1)!;
  const readings = readAmplitudes(view.amplitudes)
    .filter(({ swing }) => swing >= -FARTHEST_BEFORE && swing <= last + FARTHEST_AFTER)
    .map((reading) => ({ ...reading, u: Math.max(reading.u, LEAST_U) }))
    .sort((a, b) => a.swing - b.swing);
  return { swings, times, isOdd: oddOnes(view, swings), readings, gate: gateOf(view), isKeyed };
}

function oddOnes({ swingsPerMark, capture }: RunView, swings: number[]): boolean[] | undefined {
  if (swingsPerMark !== 0.5 || capture.kind === 'keyed_total' || swings.length < 4) return undefined;
  const isOdd = swings.map((n) => Math.round(2 * n) % 2 === 1);
  const odd = isOdd.filter(Boolean).length;
  return odd > 0 && isOdd.length - odd > 1 ? isOdd : undefined;
}

function gateOf({ capture, marks }: RunView): GateData | undefined {
  if (capture.kind !== 'gate') return undefined;
  const { flag_width_um: width, flag_distance_um: distance } = capture;
  if (!width || !distance) return { blocked: undefined, flag: 0, flagU: 0 };
  const blocked = marks.filter((mark) => mark.swing !== null).map((mark) => mark.blockedTime!);
  return { blocked, flag: width / distance, flagU: FLAG_WIDTH_U / (width * 1e-6) };
}
