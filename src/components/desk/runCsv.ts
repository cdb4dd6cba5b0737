import { unparse } from 'papaparse';
import type { RunLine } from './runLines';

/** What a spreadsheet of the reader's country takes a decimal for, and what it then takes between cells. */
export const CSV_MARKS = {
  '.': { separator: ',', words: 'decimal-point' },
  ',': { separator: ';', words: 'decimal-comma' },
} as const;

/**
 * Runs as a table, one a line, without names. ± is what covers 95 times in 100. A text that a spreadsheet would
 * take for a formula gets an apostrophe before it.
 *
 * @param lines        in the order wanted
 * @param decimalMark  also decides what stands between cells: commas, or semicolons beside decimal commas
 */
export function runCsv(lines: readonly RunLine[], decimalMark: '.' | ','): string {
  const number = (value: number | null | undefined) =>
    value === null || value === undefined ? '' : String(Number(value.toPrecision(12))).replace('.', decimalMark);
  const rows = lines.map((line) => ({
    run_id: line.id,
    bench: line.bench ?? '',
    kind: line.kind,
    length_m: number(line.length_m?.value),
    swings: number(line.swings),
    period_s: number(line.period_s?.value),
    period_u_s: number(line.period_s?.u),
    small_period_s: number(line.small_period_s?.value),
    small_period_expanded_u_s: number(line.small_period_s?.expanded_u),
    g_m_s2: number(line.g_m_s2?.value),
    g_expanded_u_m_s2: number(line.g_m_s2?.expanded_u),
    open_flags: line.open_flags,
    set_aside: line.isSetAside ? 'yes' : 'no',
    received_utc: line.received_wall_ms === null ? '' : new Date(line.received_wall_ms).toISOString(),
  }));
  return `${unparse(rows, { delimiter: CSV_MARKS[decimalMark].separator, escapeFormulae: true })}\r\n`;
}
