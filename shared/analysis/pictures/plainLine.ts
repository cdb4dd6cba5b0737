import type { Analysis, MarkRow } from '../../schemas/analysis';
import { fitLine } from '../../statistics/fitLine';

/** What the plain line says of one mark. */
export interface PlainLinePoint {
  mark: number;
  swing: number;
  /** By how much later than the fitted motion the line expects the mark, s. */
  bend: number;
}

/**
 * The straight line through the marks, which knows of no amplitude, against the fitted motion. A falling
 * amplitude makes late swings shorter, so the line cannot follow: the difference is a bow.
 *
 * @returns one point a mark in force; undefined without a motion, or with fewer than three marks
 */
export function plainLine({ motion, marks }: Pick<Analysis, 'motion' | 'marks'>): PlainLinePoint[] | undefined {
  const used = marks.filter((row): row is MarkRow & { swing: number } => row.swing !== null);
  if (!motion || used.length < 3) return undefined;
  const swings = used.map((row) => row.swing);
  const line = fitLine(
    swings,
    used.map((row) => row.time_s),
    oddOnes(swings),
  );
  return line && used.map(({ mark, swing, residual_s }, i) => bendOf(mark, swing, residual_s, line.residuals[i]!));
}

function bendOf(mark: number, swing: number, residual: number | null, off: number): PlainLinePoint {
  return { mark, swing, bend: (residual ?? 0) - off };
}

/** Passes the other way have a constant of their own, where both ways were marked. */
function oddOnes(swings: number[]): boolean[] | undefined {
  const isHalves = swings.every((n) => Math.abs(2 * n - Math.round(2 * n)) < 1e-9);
  const isOdd = swings.map((n) => Math.round(2 * n) % 2 === 1);
  const odd = isOdd.filter(Boolean).length;
  return isHalves && swings.length > 3 && odd > 0 && swings.length - odd > 1 ? isOdd : undefined;
}
