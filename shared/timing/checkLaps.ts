import { quantile } from '../statistics/quantile';
import type { Finding } from './checkMarks';
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
 * @returns `double` on the mark that fits the beat less well; `missed` on the mark after the hole
 */
export function checkLaps({ marks, swingsPerMark }: RunView): Finding[] {
  const used = marks.filter((mark) => mark.swing !== null);
  const steps = used.slice(1).map((mark, i) => (mark.swing! - used[i]!.swing!) / swingsPerMark);
  const laps = used.slice(1).map((mark, i) => (mark.time - used[i]!.time) / Math.max(steps[i]!, 0.5));
  if (laps.length < 2) return [];

  const distance = thresholdDistance(laps);
  const findings: Finding[] = [];
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
      return;
    }
    const taken = seen > stated + distance ? Math.max(Math.round(seen), stated + 1) : stated;
    if (taken > stated) findings.push(missed(mark, mark.time - last.mark.time, typical, taken - stated));
    const off = mark.time - (beat + taken * typical);
    beat += taken * typical + FOLLOW * off;
    last = { mark, off: mark.time - beat };
  });
  return findings;
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
 * In laps. Jitter from each lap and the next but one: a limp and a slow change drop out, and by the
 * median the faults looked for do not hide themselves. A difference of two such laps has 4 times the
 * variance of a mark.
 */
function thresholdDistance(laps: number[]): number {
  const changes = laps.slice(2).map((lap, k) => Math.abs(lap - laps[k]!));
  const jitter = changes.length === 0 ? 0 : (1.4826 * quantile(changes, 0.5)) / 2;
  const typical = typicalAround(laps, Math.floor(laps.length / 2));
  return Math.min(Math.max((DEVIATIONS * jitter) / typical, LEAST_DISTANCE), MOST_DISTANCE);
}
