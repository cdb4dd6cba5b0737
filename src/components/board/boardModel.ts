import type { BoardPoint } from '@shared/schemas/accounts';
import { summariseBenches, type BenchSummary } from '@shared/analysis/summariseBenches';

export interface BoardModel {
  /** Undefined while no run has a T0. */
  summary: BenchSummary | undefined;
  /** Runs that have no T0 yet. */
  without: number;
  /** Runs with a T0 whose flags nobody has answered yet: shown hollow. */
  flagged: number;
  /** Shortest and longest length, when they differ by more than a hundredth. Then the benches have no common period. */
  lengths_m: readonly [number, number] | undefined;
}

export function boardModel(points: BoardPoint[]): BoardModel {
  const timed = points.filter((point) => point.small_period_s !== null);
  const lengths = timed.flatMap((point) => (point.length_m === null ? [] : [point.length_m]));
  const [from, to] = [Math.min(...lengths), Math.max(...lengths)];
  return {
    summary: summariseBenches(
      timed.map(({ run_id, bench, small_period_s, length_m, open_flags }) => ({
        id: run_id,
        bench,
        period_s: small_period_s!.value,
        expanded_u_s: small_period_s!.expanded_u,
        length_m,
        open_flags,
      })),
    ),
    without: points.length - timed.length,
    flagged: timed.filter((point) => point.open_flags > 0).length,
    lengths_m: lengths.length > 1 && to > from * 1.01 ? [from, to] : undefined,
  };
}

/** Decimal places that tell a class's periods apart: two digits of the spread, or of the uncertainty of a lone run. */
export function periodPlaces(summary: BenchSummary): number {
  const spread =
    (summary.high_s - summary.low_s) / 2 || Math.max(...summary.lanes[0]!.dots.map((dot) => dot.expanded_u_s));
  return spread > 0 ? Math.min(6, Math.max(0, 1 - Math.floor(Math.log10(spread)))) : 3;
}
