import { MAX_SWINGS } from '@shared/schemas/limits';
import type { KeyedTotalCapture } from '@shared/schemas/run';
import { parseDecimal, type ParseProblem } from '@shared/units/parseDecimal';
import { parseStopwatch } from '@shared/units/parseStopwatch';

/** One stopwatch reading as typed. */
export interface TotalRow {
  key: number;
  time: string;
  said: string;
  first_count: KeyedTotalCapture['first_count'] | null;
}

type FieldProblem = ParseProblem | { code: 'not_a_count' | 'no_swing' | 'zero_time' | 'not_answered'; seen: string };

export interface TotalReading {
  reading: Omit<KeyedTotalCapture, 'kind'> | null;
  problems: Partial<Record<'time' | 'said' | 'first_count', FieldProblem>>;
}

/** A row nobody typed into. */
export function isBlank(row: TotalRow): boolean {
  return row.time.trim() === '' && row.said.trim() === '';
}

/** Reads one row: the reading, or what stands against it, field by field. */
export function readTotal(row: TotalRow): TotalReading {
  const problems: TotalReading['problems'] = {};
  const time = parseStopwatch(row.time);
  const said = parseDecimal(row.said);
  if (!time.ok) problems.time = time.problem;
  else if (time.us === 0) problems.time = { code: 'zero_time', seen: row.time };
  if (!said.ok) problems.said = said.problem;
  else if (!Number.isInteger(said.value) || said.value < 1 || said.value > MAX_SWINGS)
    problems.said = { code: 'not_a_count', seen: row.said.trim() };
  else if (said.value === 1 && row.first_count === 'one') problems.said = { code: 'no_swing', seen: row.said.trim() };
  if (row.first_count === null) problems.first_count = { code: 'not_answered', seen: '' };
  if (Object.keys(problems).length > 0 || !time.ok || !said.ok || row.first_count === null) {
    return { reading: null, problems };
  }
  const { us: total_us, step_us: reading_step_us } = time;
  return {
    reading: { counted_to: said.value, first_count: row.first_count, total_us, reading_step_us },
    problems,
  };
}
