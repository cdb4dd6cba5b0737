import { MAX_BLOCKS, MAX_RUN_US } from '../schemas/limits';
import { parseDecimal, type ParseProblem } from '../units/parseDecimal';
import type { GateTable } from './parseGateTable';

/** Units a gate's times can be in, and how many µs each is. */
export const US_PER = { s: 1_000_000, ms: 1_000, us: 1 } as const;

export interface GateBlocksProblem {
  code:
    ParseProblem['code'] | 'cleared_before_blocked' | 'overlaps' | 'odd_count' | 'no_rows' | 'too_many' | 'too_long';
  /** Line of the text, from 1; 0 for the whole table. */
  row: number;
  seen: string;
}

export interface GateBlocks {
  /** Blocked and cleared, µs since the first blocked edge, of every row that can be read. */
  block_us: [number, number][];
  /** Smallest step written, µs. */
  reading_step_us: number;
  /** Empty when all was read; else nothing should be kept until they are gone. */
  problems: GateBlocksProblem[];
}

export interface GateChoice {
  blockedColumn: number;
  /** null: the times of both edges stand in one column in turns, blocked first. */
  clearedColumn: number | null;
  unit: keyof typeof US_PER;
}

/** More problems than this help nobody. */
const MOST_PROBLEMS = 200;

/**
 * Blocked and cleared edges from the columns a person picked. Every row that cannot be used is named
 * with its line and the reason; none is repaired, sorted or passed over in silence.
 *
 * @param table   from `parseGateTable`
 * @param choice  columns and unit
 * @example gateBlocks(parseGateTable('0 0.02\n1 1.02'), { blockedColumn: 0, clearedColumn: 1, unit: 's' }).block_us // [[0, 20000], [1000000, 1020000]]
 */
export function gateBlocks(table: GateTable, choice: GateChoice): GateBlocks {
  const problems: GateBlocksProblem[] = [];
  const report = (code: GateBlocksProblem['code'], row: number, seen: string) => problems.push({ code, row, seen });
  const read = (row: number, cell: string) => {
    const number = parseDecimal(cell);
    if (!number.ok) report(number.problem.code, row, number.problem.seen);
    return number.ok ? number.value * US_PER[choice.unit] : undefined;
  };

  const block_us: [number, number][] = [];
  let start: number | undefined;
  for (const { row, cells } of pairsOfCells(table, choice, report)) {
    const [blocked, cleared] = cells.map((cell) => read(row, cell));
    if (blocked === undefined || cleared === undefined) continue;
    start ??= blocked;
    // The first edge is taken off before rounding, so that times since 1970 keep their last digits.
    const [on, off] = [Math.round(blocked - start), Math.round(cleared - start)];
    if (off <= on) report('cleared_before_blocked', row, cells.join(' – '));
    else if (on < (block_us.at(-1)?.[1] ?? 0)) report('overlaps', row, cells.join(' – '));
    else if (off > MAX_RUN_US) report('too_long', row, cells.join(' – '));
    else block_us.push([on, off]);
  }
  if (table.rows.length === 0) report('no_rows', 0, '');
  if (block_us.length > MAX_BLOCKS) report('too_many', 0, String(block_us.length));
  return { block_us, reading_step_us: smallestStep(table, choice), problems: problems.slice(0, MOST_PROBLEMS) };
}

function pairsOfCells(
  { rows }: GateTable,
  { blockedColumn, clearedColumn }: GateChoice,
  report: (code: 'odd_count', row: number, seen: string) => void,
): { row: number; cells: [string, string] }[] {
  if (clearedColumn !== null) {
    return rows.map(({ row, cells }) => ({ row, cells: [cells[blockedColumn] ?? '', cells[clearedColumn] ?? ''] }));
  }
  const edges = rows.map(({ row, cells }) => ({ row, cell: cells[blockedColumn] ?? '' }));
  const last = edges.at(-1);
  if (last && edges.length % 2 === 1) report('odd_count', last.row, last.cell);
  return edges.flatMap(({ row, cell }, i): { row: number; cells: [string, string] }[] => {
    const next = edges[i + 1];
    return i % 2 === 0 && next ? [{ row, cells: [cell, next.cell] }] : [];
  });
}

function smallestStep({ rows }: GateTable, { blockedColumn, clearedColumn, unit }: GateChoice): number {
  const cells = rows.flatMap((row) => [
    row.cells[blockedColumn],
    clearedColumn === null ? '' : row.cells[clearedColumn],
  ]);
  const places = cells.map((cell) => /[.,](\d+)\D*$/.exec(cell ?? '')?.[1]?.length ?? 0);
  const most = places.reduce((a, b) => Math.max(a, b), 0);
  return Math.min(Math.max(Math.round(US_PER[unit] / 10 ** most), 1), 1_000_000);
}
