import type { Flag } from '../schemas/analysis';
import type { Measured } from '../schemas/common';
import type { AmplitudePoint } from '../physics/amplitudeCurve';
import { checkChatter } from './checkChatter';
import { checkCount } from './checkCount';
import { checkDrift } from './checkDrift';
import { checkFirstMark } from './checkFirstMark';
import { checkLaps } from './checkLaps';
import { checkOffCentre } from './checkOffCentre';
import { checkOutliers } from './checkOutliers';
import { checkPause } from './checkPause';
import { checkPlausible } from './checkPlausible';
import { checkRoundNumbers } from './checkRoundNumbers';
import type { RunView } from './runView';

/** What a fit has found so far; null and empty while there is nothing. */
export interface Known {
  /** For each mark in force: what grows evenly with time. */
  elapsed: number[];
  /** For each mark in force, observed minus calculated, s. */
  residuals: number[];
  /** How marks pull the fit along: see `Scattered`. */
  basis: number[][];
  period: Measured | null;
  smallPeriod: Measured | null;
  /** Amplitudes as read. */
  readings: AmplitudePoint[];
  /** True when the pendulum's motion was fitted, not a line. */
  followsMotion: boolean;
  /** Where a gate stands, rad; null when the motion does not say. */
  gateAngle: Measured | null;
}

/** A flag before anybody looked at it. */
export type Finding = Omit<Flag, 'answered'>;

/**
 * What a person should look at. Proposals only: nothing is changed here. Thresholds follow the run's own
 * jitter. A flag somebody kept comes back answered.
 */
export function checkMarks(view: RunView, known: Known): Flag[] {
  const findings = [
    ...checkTiming(view, known),
    ...checkRoundNumbers(view),
    ...checkChatter(view),
    ...checkRecording(view),
  ];
  return findings.map((finding) => ({
    ...finding,
    answered: view.kept.some(({ flag, mark }) => flag === finding.code && mark === finding.mark),
  }));
}

/** From the coarse to the fine: while the laps or the beat are in doubt the fit is no judge of single marks or the count. */
function checkTiming(view: RunView, known: Known): Finding[] {
  const laps = checkLaps(view);
  if (laps.length > 0) return laps;
  const pause = checkPause(view, known);
  if (pause.length > 0) return pause;
  const count = checkCount(view, known);
  return [
    ...checkFirstMark(view, known),
    ...checkOutliers(view, known),
    ...count,
    ...(count.length === 0 ? checkPlausible(view, known) : []),
    ...checkOffCentre(view, known),
    ...checkDrift(view, known),
  ];
}

/** What the pad wrote down: the clocks parted, or the run was cut short. */
function checkRecording({ capture, marks }: RunView): Finding[] {
  if (capture.kind !== 'tap') return [];
  const parted = new Map<number, number>();
  for (const event of capture.events) {
    if (event.kind !== 'clock_gap') continue;
    const mark = Math.min(Math.max(event.after_mark, 0), marks.length - 1);
    parted.set(mark, (parted.get(mark) ?? 0) + (event.wall_minus_mono_ms ?? 0) / 1000);
  }
  const findings = [...parted].map(([mark, wall_minus_mono_s]): Finding => {
    return { code: 'clock_gap', mark, seen: { wall_minus_mono_s }, choices: ['keep_flagged'] };
  });
  if (capture.ended === 'cut_short') {
    findings.push({ code: 'cut_short', mark: null, seen: { marks: marks.length }, choices: ['keep_flagged'] });
  }
  return findings;
}
