import { quantile } from '../statistics/quantile';
import type { ViewMark } from './runView';

interface Numbering {
  swingsPerMark: number;
  leftOut: ReadonlySet<number>;
  /** Marks missing before a mark, by the mark's index. */
  gaps: ReadonlyMap<number, number>;
}

/**
 * Numbers marks with swings. One mark is one step, plus the gaps somebody stated; a lap that merely
 * looks twice as long stays one step until a person says so (`checkMarks` flags it).
 * A mark that is left out keeps its step if the lap that closes over it is nearer to two than to one:
 * so leaving out a double renumbers, and leaving out a late but real mark does not.
 *
 * @param times  s, rising, all raw marks
 * @returns      the marks, and `origin`: swings from the first raw mark to the first one in force
 */
export function numberMarks(times: number[], { swingsPerMark, leftOut, gaps }: Numbering) {
  const typical = typicalLap(times, gaps);
  const marks: ViewMark[] = [];
  let steps: number | null = null;
  let origin = 0;
  let from = 0;
  let skipped = 0;
  let gap = 0;
  times.forEach((time, mark) => {
    gap += mark === 0 ? 0 : (gaps.get(mark) ?? 0);
    const isOut = leftOut.has(mark);
    let swing: number | null = null;
    if (isOut) skipped += 1;
    else {
      const least = gap + (steps === null ? 0 : 1);
      const seen = skipped === 0 || typical === 0 ? least : Math.round((time - times[from]!) / typical);
      const taken = Math.min(Math.max(seen, least), least + skipped);
      if (steps === null) origin = taken * swingsPerMark;
      steps = steps === null ? 0 : steps + taken;
      swing = steps * swingsPerMark;
      [from, skipped, gap] = [mark, 0, 0];
    }
    marks.push({
      ...{ mark, time, swing, leftOut: isOut, gap: mark === 0 ? 0 : (gaps.get(mark) ?? 0) },
      ...{ blockedTime: null, partOf: null },
    });
  });
  return { marks, origin };
}

/**
 * Renumbers marks so that the last one in force is at a stated number of swings. Whole steps that
 * are to be added go one by one to the lap that is longest for its steps; anything else scales all.
 */
export function spreadSwings(marks: ViewMark[], swings: number, swingsPerMark: number): ViewMark[] {
  const used = marks.filter((mark) => mark.swing !== null);
  const counted = used.at(-1)?.swing ?? 0;
  if (used.length < 2 || counted === 0 || counted === swings) return marks;
  const laps = used.slice(1).map((mark, i) => ({
    duration: mark.time - used[i]!.time,
    steps: (mark.swing! - used[i]!.swing!) / swingsPerMark,
  }));
  const added = (swings - counted) / swingsPerMark;
  const isWhole = added > 0 && Number.isInteger(added);
  for (let i = 0; isWhole && i < added; i += 1) {
    const longest = laps.reduce((a, b) => (b.duration / b.steps > a.duration / a.steps ? b : a));
    longest.steps += 1;
  }
  const scale = isWhole ? 1 : swings / counted;
  let swing = 0;
  const swingOf = new Map([[used[0]!.mark, 0]]);
  used.slice(1).forEach((mark, i) => {
    swing += laps[i]!.steps * swingsPerMark * scale;
    swingOf.set(mark.mark, swing);
  });
  return marks.map((mark) => ({ ...mark, swing: swingOf.get(mark.mark) ?? null }));
}

/** Median lap for one step, s; 0 when there is no lap. */
function typicalLap(times: number[], gaps: ReadonlyMap<number, number>): number {
  const laps = times.slice(1).map((time, i) => (time - times[i]!) / (1 + (gaps.get(i + 1) ?? 0)));
  return laps.length === 0 ? 0 : quantile(laps, 0.5);
}
