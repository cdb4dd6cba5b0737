import { gateBlocks, type GateBlocks, type GateChoice } from '@shared/timing/gateBlocks';
import { parseGateTable, type GateColumn, type GateTable } from '@shared/timing/parseGateTable';

/** What a pasted table comes to: its columns to pick from, and the blocks by what is picked. */
export interface GateReading {
  columns: GateColumn[];
  rows: number;
  /** As given, or the best guess; null when there is no column of numbers. */
  choice: GateChoice | null;
  blocks: GateBlocks | null;
}

/** Reads a whole table anew: quick enough for a change of columns, and it keeps nothing between two calls. */
export function readGate(text: string, given: GateChoice | null): GateReading {
  const table = parseGateTable(text);
  const fits = given !== null && Math.max(given.blockedColumn, given.clearedColumn ?? 0) < table.columns.length;
  const choice = fits ? given : guessChoice(table);
  return {
    columns: table.columns,
    rows: table.rows.length,
    choice,
    blocks: choice && gateBlocks(table, choice),
  };
}

/** Columns by their names, else the first two of numbers; one that only counts the rows is passed over. */
export function guessChoice({ columns }: GateTable): GateChoice | null {
  const ofNumbers = columns.filter(({ numbers }) => numbers > 0.5);
  // Two columns are both edges, even where blocked happens to read 0, 1, 2 s.
  const pick = ofNumbers.length > 2 ? ofNumbers.filter((column) => !countsRows(column)) : ofNumbers;
  const cleared = pick.find(({ name }) => /clear|unblock|\bopen|\boff\b/i.test(name));
  const blocked = pick.find((column) => column !== cleared && /block|dark|\bon\b/i.test(column.name)) ?? pick[0];
  if (!blocked) return null;
  const other = cleared ?? pick.find((column) => column.index > blocked.index) ?? null;
  const names = `${blocked.name} ${other?.name ?? ''}`;
  const unit = /(µs|μs|\bus\b)/i.test(names) ? 'us' : /\bms\b/i.test(names) ? 'ms' : 's';
  return { blockedColumn: blocked.index, clearedColumn: other?.index ?? null, unit };
}

function countsRows({ samples }: GateColumn): boolean {
  const first = Number(samples[0]);
  return samples.length > 1 && Number.isInteger(first) && samples.every((cell, i) => Number(cell) === first + i);
}
