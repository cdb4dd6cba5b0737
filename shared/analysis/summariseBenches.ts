import { quantile } from '../statistics/quantile';

/** One run of a bench, with its uncertainty as the run states it: ± covers 95 times in 100. */
export interface BenchDot {
  id: string;
  bench: number;
  period_s: number;
  expanded_u_s: number;
  length_m: number | null;
  open_flags: number;
}

export interface Lane {
  bench: number;
  dots: BenchDot[];
  /** Median of the bench's runs: what the bench counts with. */
  middle_s: number;
}

export interface BenchSummary {
  lanes: Lane[];
  runs: number;
  /** Median of the benches, one vote each. */
  median_s: number;
  /** Half of the benches lie between these; with fewer than four benches, all of them do. */
  low_s: number;
  high_s: number;
  spreadIs: 'half' | 'all';
  /** Range for a picture, s; dots beyond it stand at the edge with an arrow and their number. */
  range_s: readonly [number, number];
  beyond: ReadonlySet<BenchDot>;
}

/**
 * What the runs of a class say together: each bench has one vote, the median of its runs.
 *
 * @param dots  runs in any order; period and U in s
 * @returns     undefined while there is no run
 */
export function summariseBenches(dots: BenchDot[]): BenchSummary | undefined {
  if (dots.length === 0) return undefined;
  const benches = [...new Set(dots.map((dot) => dot.bench))].sort((a, b) => a - b);
  const lanes = benches.map((bench) => {
    const own = dots.filter((dot) => dot.bench === bench);
    return {
      bench,
      dots: own,
      middle_s: quantile(
        own.map((dot) => dot.period_s),
        0.5,
      ),
    };
  });
  const middles = lanes.map((lane) => lane.middle_s);
  const spreadIs = lanes.length < FEW_BENCHES ? 'all' : 'half';
  const [low_s, high_s] =
    spreadIs === 'all'
      ? [Math.min(...middles), Math.max(...middles)]
      : [quantile(middles, 0.25), quantile(middles, 0.75)];
  const median_s = quantile(middles, 0.5);
  const range_s = rangeOf(dots, median_s);
  const beyond = new Set(dots.filter((dot) => dot.period_s < range_s[0] || dot.period_s > range_s[1]));
  return { lanes, runs: dots.length, median_s, low_s, high_s, spreadIs, range_s, beyond };
}

const FEW_BENCHES = 4;
/** A dot this many quartile spreads from the median would squeeze all others together. */
const FAR = 6;

/** Holds the dots and their bars, save for those so far out that the rest could not be told apart. */
function rangeOf(dots: BenchDot[], median_s: number): readonly [number, number] {
  const away = dots.map((dot) => Math.abs(dot.period_s - median_s));
  const usual = Math.max(
    quantile(away, 0.5),
    quantile(
      dots.map((dot) => dot.expanded_u_s),
      0.5,
    ),
    0.001 * median_s,
  );
  const near = dots.filter((dot) => Math.abs(dot.period_s - median_s) <= FAR * usual);
  const from = Math.min(...near.map((dot) => dot.period_s - Math.min(dot.expanded_u_s, FAR * usual)));
  const to = Math.max(...near.map((dot) => dot.period_s + Math.min(dot.expanded_u_s, FAR * usual)));
  const room = 0.06 * (to - from) || 0.001;
  return [from - room, to + room];
}
