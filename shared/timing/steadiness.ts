import { quantile } from '../statistics/quantile';

/** Laps looked at: steadiness is about now, not about the start. */
const LAPS = 10;
const LEAST_LAPS = 4;
/** Scatter of one tap, s: rhythmic taps scatter by 20 to 50 ms, single ones by 70 (AJP 87, 2019, 110). */
const EVEN_S = 0.04;
const UNEVEN_S = 0.08;

export type Steadiness = 'even' | 'fair' | 'uneven';

/**
 * How evenly the last taps came, without saying how fast: for the pad while a run is going.
 *
 * @param times_us       marks in force, µs, rising
 * @param swingsPerMark  0.5 when both ways are tapped: then every second lap is compared, so that a mark
 *                       beside the centre does not count against the tapper
 * @returns              undefined below four laps
 */
export function steadiness(times_us: readonly number[], swingsPerMark: number): Steadiness | undefined {
  const step = swingsPerMark === 0.5 ? 2 : 1;
  const laps = times_us.slice(step).map((time, i) => (time - times_us[i]!) / 1e6);
  const last = laps.slice(-LAPS);
  if (last.length < LEAST_LAPS) return undefined;
  const typical = quantile(last, 0.5);
  const off = quantile(
    last.map((lap) => Math.abs(lap - typical)),
    0.5,
  );
  // Median distance to standard deviation of a lap; a lap holds the scatter of two taps.
  const scatter_s = (1.4826 * off) / Math.SQRT2;
  if (scatter_s <= EVEN_S) return 'even';
  return scatter_s <= UNEVEN_S ? 'fair' : 'uneven';
}
