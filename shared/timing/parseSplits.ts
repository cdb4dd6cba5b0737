import { MAX_MARKS } from '../schemas/limits';
import type { ParseProblem } from '../units/parseDecimal';
import { parseStopwatch } from '../units/parseStopwatch';

export interface SplitsProblem {
  code: ParseProblem['code'] | 'mixed_marks' | 'not_rising' | 'too_few' | 'too_many';
  /** Line of the text, from 1. */
  line: number;
  seen: string;
}

export interface Splits {
  /** µs since the first press, which is 0 and comes first. */
  mark_us: number[];
  /** The finest step among the readings, µs. */
  reading_step_us: number;
  /** Empty when all was read; else nothing should be kept until they are gone. */
  problems: SplitsProblem[];
}

/**
 * Reads a list of splits: one a line, or with spaces, tabs or semicolons between them. Where points mark
 * the decimals, a comma separates if both its sides have a point of their own (or are the first press, 0);
 * any other comma there may be a decimal mark or a group of thousands, and is told (`mixed_marks`) rather
 * than guessed at. The first press is 0 and may be left away.
 *
 * @param text  as typed or pasted
 * @returns     the splits that could be read, and a problem for each that could not
 * @example parseSplits('2,01 4,03 6,02').mark_us // [0, 2_010_000, 4_030_000, 6_020_000]
 */
export function parseSplits(text: string): Splits {
  const hasPoints = /\d\.\d/.test(text);
  const problems: SplitsProblem[] = [];
  const mark_us: number[] = [0];
  const steps: number[] = [];
  text.split(/\r\n?|\n/).forEach((content, i) => {
    for (const seen of content
      .replace(/^\uFEFF/, '')
      .split(/[\s;]+|,(?!\d)/)
      .flatMap((word) => (hasPoints ? atCommas(word) : word))
      .filter(Boolean)) {
      const line = i + 1;
      if (hasPoints && seen.includes(',')) {
        problems.push({ code: 'mixed_marks', line, seen });
        continue;
      }
      const reading = parseStopwatch(seen);
      if (!reading.ok) {
        problems.push({ ...reading.problem, line });
        continue;
      }
      steps.push(reading.step_us);
      if (reading.us === 0 && steps.length === 1) continue;
      if (reading.us <= mark_us.at(-1)!) problems.push({ code: 'not_rising', line, seen });
      else mark_us.push(reading.us);
    }
  });
  const lines = text.split(/\r\n?|\n/).length;
  if (mark_us.length < 2 && problems.length === 0) problems.push({ code: 'too_few', line: lines, seen: '' });
  if (mark_us.length > MAX_MARKS) problems.push({ code: 'too_many', line: lines, seen: String(mark_us.length) });
  return { mark_us, reading_step_us: Math.min(10_000_000, ...steps), problems };
}

/** The readings a word holds, or the word itself when its commas may mean something else. */
function atCommas(word: string): string[] {
  const parts = word.split(',');
  return parts.every((part) => /\d\.\d|^0?$/.test(part)) ? parts : [word];
}
