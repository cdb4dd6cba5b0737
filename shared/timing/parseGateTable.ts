import Papa from 'papaparse';
import { parseDecimal } from '../units/parseDecimal';

export interface GateColumn {
  index: number;
  /** From the last header row; empty when there is none. */
  name: string;
  /** The first few cells below the header. */
  samples: string[];
  /** Share of cells below the header that read as a number, 0 to 1. */
  numbers: number;
}

export interface GateTable {
  columns: GateColumn[];
  /** Rows below the header that are not blank; `row` is the line in the text, from 1. */
  rows: { row: number; cells: string[] }[];
}

const SAMPLES = 5;

/**
 * Splits a pasted or uploaded table into rows and columns, for a person to pick from. Finds tabs,
 * semicolons, commas or spaces between the cells, decimal commas, header rows and a byte order mark by
 * itself. Nothing is interpreted or dropped: `gateBlocks` does the reading.
 *
 * @param text  the whole file
 * @returns     no columns when there is nothing but blank lines
 */
export function parseGateTable(text: string): GateTable {
  const plain = text.replace(/^\uFEFF/, '');
  const separator = separatorOf(plain);
  const tidied = separator === ' ' ? plain.replace(/^[ \t]+|[ \t]+$/gm, '').replace(/[ \t]+/g, ' ') : plain;
  const { data } = Papa.parse<string[]>(tidied, { delimiter: separator });
  const filled = data
    .map((cells, i) => ({ row: i + 1, cells: cells.map((cell) => cell.trim()) }))
    .filter(({ cells }) => cells.some((cell) => cell !== ''));
  const firstNumbers = filled.findIndex(({ cells }) => cells.some((cell) => parseDecimal(cell).ok));
  const headers = firstNumbers === -1 ? filled : filled.slice(0, firstNumbers);
  const rows = firstNumbers === -1 ? [] : filled.slice(firstNumbers);
  const width = Math.max(0, ...filled.slice(0, 100).map(({ cells }) => cells.length));
  const columns = Array.from({ length: width }, (_, index): GateColumn => {
    const cells = rows.map((row) => row.cells[index] ?? '');
    return {
      index,
      name: headers.at(-1)?.cells[index] ?? '',
      samples: cells.slice(0, SAMPLES),
      numbers: cells.length === 0 ? 0 : cells.filter((cell) => parseDecimal(cell).ok).length / cells.length,
    };
  });
  return { columns, rows };
}

/**
 * What stands between cells. Looked for in this order, because a comma may be a decimal mark wherever
 * something else already separates.
 */
function separatorOf(text: string): string {
  const lines = text
    .split(/\r\n?|\n/)
    .filter((line) => line.trim() !== '')
    .slice(0, 200);
  const isUsual = (pattern: RegExp) => lines.filter((line) => pattern.test(line)).length >= 0.6 * lines.length;
  if (lines.length === 0) return ',';
  if (isUsual(/\t/)) return '\t';
  if (isUsual(/;/)) return ';';
  if (isUsual(/\S +[+-]?[\d.,]/) && !isUsual(/\d, +/)) return ' ';
  return ',';
}
