import type { FoldedMark } from './foldTaps';

const LEAST_US = 60_000;
const LEAST_GLOVED_US = 150_000;
const PART_OF_LAP = 0.15;
/** One or two laps may be anything: a slow start, a missed pass. They say nothing about the next one yet. */
const LEAST_LAPS = 3;

/**
 * How soon after a mark a second contact is a bounce of the same finger. Common practice, no source:
 * contacts bounce within some tens of milliseconds, gloves and wet screens longer, and no one counts
 * two passes within a seventh of a lap.
 *
 * @param marks   marks in force, may be empty
 * @param gloved  thick or wet fingers
 * @returns       µs after the last mark
 */
export function bounceGate(marks: readonly FoldedMark[], gloved: boolean): number {
  const least = gloved ? LEAST_GLOVED_US : LEAST_US;
  const lap = marks.length > LEAST_LAPS ? medianLap(marks) : undefined;
  return Math.max(least, Math.round(PART_OF_LAP * (lap ?? 0)));
}

/**
 * @param marks  marks in force
 * @returns      the middle lap, µs, over laps with nothing missed in them; undefined with none yet
 */
export function medianLap(marks: readonly FoldedMark[]): number | undefined {
  const laps = marks
    .flatMap((mark, i) => (i > 0 && mark.missed === 0 ? [mark.at_us - marks[i - 1]!.at_us] : []))
    .sort((a, b) => a - b);
  if (laps.length === 0) return undefined;
  const middle = laps.length >> 1;
  return laps.length % 2 === 1 ? laps[middle]! : (laps[middle - 1]! + laps[middle]!) / 2;
}
