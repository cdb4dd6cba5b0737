import { quantile } from '../statistics/quantile';

/** Laps looked at: steadiness is about now, not about the start. */
const LAPS = 10;
const LEAST_LAPS = 4;
/** Scatter of one tap, s: rhythmic taps scatter by 20 to 50 ms, single ones by 70 (AJP 87, 2019, 110). */
const EVEN_S = 0.04;
const UNEVEN_S = 0.08;

/** A lap this far from the others, s, is no scatter: something was missed or doubled … */
const STRAY_S = 4 * UNEVEN_S;
/** … and is told for so many laps. */
const STRAY_LAPS = 3;

export type Steadiness = 'even' | 'fair' | 'uneven';

/**
 * How evenly the last taps came, without saying how fast: for the pad while a run is going.
 *
 * @param marks          marks in force, rising, each with how many before it were said to be missed
 * @param swingsPerMark  0.5 when both ways are tapped: then every second lap is compared, so that a mark
 *                       beside the centre does not count against the tapper
 * @returns              undefined below four laps
 */
export function steadiness(
  marks: readonly { at_us: number; missed: number }[],
  swingsPerMark: number,
): Steadiness | undefined {
  const step = swingsPerMark === 0.5 ? 2 : 1;
  const laps = marks.slice(step).flatMap(({ at_us }, i) => {
    const isWhole = marks.slice(i + 1, i + 1 + step).every(({ missed }) => missed === 0);
    return isWhole ? [(at_us - marks[i]!.at_us) / 1e6] : [];
  });
  const last = laps.slice(-LAPS);
  if (last.length < LEAST_LAPS) return undefined;
  const typical = quantile(last, 0.5);
  if (last.slice(-STRAY_LAPS).some((lap) => Math.abs(lap - typical) > STRAY_S)) return 'uneven';
  const off = quantile(
    last.map((lap) => Math.abs(lap - typical)),
    0.5,
  );
  // Median distance to standard deviation of a lap; a lap holds the scatter of two taps.
  const scatter_s = (1.4826 * off) / Math.SQRT2;
  if (scatter_s <= EVEN_S) return 'even';
  return scatter_s <= UNEVEN_S ? 'fair' : 'uneven';
}
