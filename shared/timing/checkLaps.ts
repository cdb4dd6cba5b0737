import { addedColumn } from '../statistics/addedColumn';
import { hypot } from '../statistics/hypot';
import { quantile } from '../statistics/quantile';
import type { Finding } from './checkMarks';
import { pauseAt } from './checkPause';
import type { RunView, ViewMark } from './runView';

/** Laps on either side that tell what a lap is like here: the period itself falls with the amplitude. */
const NEIGHBOURS = 5;
/** Thresholds stand this many standard deviations of a mark from one step, at least half a step and at most this much. */
const DEVIATIONS = 4;
const LEAST_DISTANCE = 0.5;
const MOST_DISTANCE = 0.7;
/** Share of a mark's deviation from the beat that the beat follows. */
const FOLLOW = 0.5;

/**
 * Marks struck twice and marks that are missing. A beat is carried along the marks, so one late tap does
 * not make a long lap and a short one look like faults; each mark is then so many steps of the beat
 * after the last. Works the same for every pass, every swing and every k-th.
 *
 * @returns `double` on the mark that fits the beat less well; `missed` on the mark after the hole, or `pause`
 *          there when the hole is no whole number of laps
 */
export function checkLaps({ marks, swingsPerMark }: RunView): Finding[] {
  const used = marks.filter((mark) => mark.swing !== null);
  const steps = used.slice(1).map((mark, i) => (mark.swing! - used[i]!.swing!) / swingsPerMark);
  const laps = used.slice(1).map((mark, i) => (mark.time - used[i]!.time) / Math.max(steps[i]!, 0.5));
  if (laps.length < 2) return [];

  const distance = thresholdDistance(laps);
  const findings: Finding[] = [];
  /** For each mark the steps of the beat since the first; of one struck twice none. */
  const beats: (number | null)[] = [0];
  let counted = 0;
  let beat = used[0]!.time;
  let last = { mark: used[0]!, off: 0 };
  used.slice(1).forEach((mark, i) => {
    const typical = typicalAround(laps, i);
    const stated = Math.max(Math.round(steps[i]!), 1);
    const seen = (mark.time - beat) / typical;
    if (seen < 1 - distance) {
      const off = mark.time - beat;
      const worse = Math.abs(off) < Math.abs(last.off) && last.mark !== used[0] ? last.mark : mark;
      findings.push(double(worse, mark.time - last.mark.time, typical));
      beats.push(null);
      return;
    }
    const taken = seen > stated + distance ? Math.max(Math.round(seen), stated + 1) : stated;
    if (taken > stated) findings.push(missed(mark, mark.time - last.mark.time, typical, taken - stated));
    const off = mark.time - (beat + taken * typical);
    counted += taken;
    beats.push(counted);
    beat += taken * typical + FOLLOW * off;
    last = { mark, off: mark.time - beat };
  });
  const jitter = jitterOf(laps);
  return findings.map((finding) => {
    if (finding.code !== 'missed') return finding;
    const at = used.findIndex(({ mark }) => mark === finding.mark);
    const shift = shiftAt(at, used, beats, swingsPerMark === 0.5);
    const lap = finding.seen.typical_lap_s!;
    return shift && Math.abs(shift.size) > Math.max(LEAST_SHIFT * lap, DEVIATIONS * jitter * shift.weight)
      ? pauseAt(used, at, lap, shift.size)
      : finding;
  });
}

/** Of a lap; a hole that is so far from a whole number of laps, and by more than jitter explains, is none of missing marks. */
const LEAST_SHIFT = 0.1;

/**
 * By how much later than whole laps the beat goes on from a mark on, seen from the marks around it, s, and how
 * much the jitter of one mark counts in that.
 */
function shiftAt(at: number, used: ViewMark[], beats: (number | null)[], isBothWays: boolean) {
  const near = used.map((_, i) => i).filter((i) => beats[i] !== null && i >= at - NEIGHBOURS && i < at + NEIGHBOURS);
  if (near.filter((i) => i < at).length < 2 || near.filter((i) => i >= at).length < 2) return undefined;
  const fit = addedColumn(
    near.map((i) => used[i]!.time),
    [near.map(() => 1), near.map((i) => beats[i]!), ...(isBothWays ? [near.map((i) => beats[i]! % 2)] : [])],
    near.map((i) => Number(i >= at)),
  );
  return fit && { size: fit.size, weight: hypot(...fit.slopeWeights) };
}

function double({ mark }: ViewMark, lap: number, typical: number): Finding {
  return {
    code: 'double',
    mark,
    seen: { lap_s: lap, typical_lap_s: typical },
    choices: ['leave_out_mark', 'keep_flagged'],
  };
}

function missed({ mark }: ViewMark, lap: number, typical: number, count: number): Finding {
  return {
    code: 'missed',
    mark,
    seen: { lap_s: lap, typical_lap_s: typical, count: Math.min(count, 50) },
    choices: ['insert_gap', 'keep_flagged'],
  };
}

/** By pairs of laps, because the two halves of a swing differ when the mark is off centre. */
function typicalAround(laps: number[], i: number): number {
  const around = laps.slice(Math.max(0, i - NEIGHBOURS), i + NEIGHBOURS + 1);
  const pairs = around.slice(1).map((lap, k) => (lap + around[k]!) / 2);
  return quantile(pairs, 0.5);
}

/**
 * Standard deviation of a mark, s. From each lap and the next but one: a limp and a slow change drop out, and
 * by the median the faults looked for do not hide themselves. A difference of two such laps has 4 times the
 * variance of a mark.
 */
function jitterOf(laps: number[]): number {
  const changes = laps.slice(2).map((lap, k) => Math.abs(lap - laps[k]!));
  return changes.length === 0 ? 0 : (1.4826 * quantile(changes, 0.5)) / 2;
}

/** In laps. */
function thresholdDistance(laps: number[]): number {
  const typical = typicalAround(laps, Math.floor(laps.length / 2));
  return Math.min(Math.max((DEVIATIONS * jitterOf(laps)) / typical, LEAST_DISTANCE), MOST_DISTANCE);
}
