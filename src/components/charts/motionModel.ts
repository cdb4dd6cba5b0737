import { fittedMotion, type FittedMotion } from '@shared/analysis/pictures/fittedMotion';
import { evenInstants, statesAt, type MotionState } from '@shared/analysis/pictures/statesAt';
import type { Analysis } from '@shared/schemas/analysis';
import { degrees } from '@shared/units/angle';

/** A mark as it was pressed, on the fitted motion. Angles in degrees. */
export interface MotionMark {
  mark: number;
  swing: number;
  time_s: number;
  /** When the motion has the event the mark stands for; null where it was not marked one by one. */
  predicted_s: number | null;
  angle_deg: number;
  rate_deg_s: number;
}

/** What the two motion pictures are drawn from. */
export interface MotionModel {
  motion: FittedMotion;
  marks: MotionMark[];
  /** From the release to the last turning point, s since the first raw mark. */
  whole_s: [number, number];
  /** Greatest angle and angular velocity of the run, degrees and degrees a second. */
  top: { angle: number; rate: number };
}

/** @returns undefined when the analysis has no motion */
export function motionModel(analysis: Analysis): MotionModel | undefined {
  const motion = fittedMotion(analysis);
  if (!motion) return undefined;
  const instants = instantsOf(analysis);
  const states = statesAt(
    motion,
    instants.map(({ time_s }) => time_s),
  );
  const { turn, turnCount, angularFrequency } = motion;
  return {
    motion,
    marks: instants.map((instant, i) => ({
      ...instant,
      angle_deg: degrees(states[i]!.angle),
      rate_deg_s: degrees(states[i]!.rate),
    })),
    whole_s: [turn(0).time, turn(turnCount - 1).time],
    top: { angle: degrees(turn(0).amplitude), rate: degrees(fastest(turn(0).amplitude, angularFrequency)) },
  };
}

/** A stretch of the run as it is drawn: a curve, or where swings would run together the space it fills. */
export interface Stretch {
  range_s: [number, number];
  curve: MotionState[];
  /** Amplitude and greatest angular velocity over time; empty where there is a curve. */
  outline: { time: number; angle: number; rate: number }[];
}

/** More swings than this side by side are no curve any more. */
const MOST_SWINGS = 32;
/** Swings shown around a mark. */
const CLOSE_SWINGS = 4;
const SAMPLES_A_SWING = 32;
const MOST_OUTLINE = 240;

/** The whole run, or the few swings around an instant. */
export function stretchOf({ motion, whole_s }: MotionModel, around_s: number | null): Stretch {
  const swing_s = (whole_s[1] - whole_s[0]) / Math.max((motion.turnCount - 1) / 2, 0.5);
  const range_s = around_s === null ? whole_s : closeUp(whole_s, around_s, CLOSE_SWINGS * swing_s);
  const swings = (range_s[1] - range_s[0]) / swing_s;
  if (swings > MOST_SWINGS) return { range_s, curve: [], outline: outlineOf(motion) };
  const count = Math.max(2, Math.ceil(swings * SAMPLES_A_SWING));
  return { range_s, curve: statesAt(motion, evenInstants(range_s[0], range_s[1], count)), outline: [] };
}

function closeUp([from, to]: [number, number], around: number, length: number): [number, number] {
  if (to - from <= length) return [from, to];
  const start = Math.min(Math.max(around - length / 2, from), to - length);
  return [start, start + length];
}

function outlineOf({ turn, turnCount, angularFrequency }: FittedMotion): Stretch['outline'] {
  const stride = Math.ceil(turnCount / MOST_OUTLINE);
  return Array.from({ length: Math.ceil(turnCount / stride) }, (_, i) => {
    const { time, amplitude } = turn(Math.min(i * stride, turnCount - 1));
    return { time, angle: amplitude, rate: fastest(amplitude, angularFrequency) };
  });
}

/** Through the lowest point, from the energy at the turning point: the little lost on the way is below a line's width. */
const fastest = (amplitude: number, angularFrequency: number) => 2 * angularFrequency * Math.sin(amplitude / 2);

function instantsOf({ marks, swings, period_s }: Analysis): Omit<MotionMark, 'angle_deg' | 'rate_deg_s'>[] {
  if (marks.length > 0) {
    return marks.flatMap(({ mark, swing, time_s, residual_s }) =>
      swing === null ? [] : [{ mark, swing, time_s, predicted_s: residual_s === null ? null : time_s - residual_s }],
    );
  }
  // A keyed total is two instants: start and stop.
  const stop = { mark: 1, swing: swings ?? 0, time_s: (period_s?.value ?? 0) * (swings ?? 0), predicted_s: null };
  return [{ mark: 0, swing: 0, time_s: 0, predicted_s: null }, stop];
}
