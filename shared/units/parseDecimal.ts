/** Why a text could not be read. `code` picks the sentence, `seen` is the text it quotes. */
export interface ParseProblem {
  code:
    | 'empty'
    | 'has_unit'
    | 'not_a_number'
    | 'two_marks'
    | 'not_a_time'
    | 'sixty_or_more'
    | 'too_fine'
    | 'too_long'
    | 'out_of_range';
  seen: string;
}
export type Parsed<Fields> = ({ ok: true } & Fields) | { ok: false; problem: ParseProblem };

/**
 * Reads a number as people type it: decimal point or decimal comma, spaces around it or between
 * groups of three digits. A unit behind the number is refused rather than guessed at, and so is a
 * text with two different marks, because `1,234.5` and `1.234,5` mean different things to different people.
 *
 * @param text  what was typed
 * @returns     the number, always finite; or the problem: empty, has_unit, two_marks, not_a_number
 * @example parseDecimal(' 40,12 ') // { ok: true, value: 40.12 }
 */
export function parseDecimal(text: string): Parsed<{ value: number }> {
  const typed = tidy(text);
  if (typed === '') return refuse('empty', text);
  if (/^[+-]?[\d.,\s]*\d[\d.,\s]*[a-zµμ°%"'′″/²]+\d*$/i.test(typed)) return refuse('has_unit', text);
  if (/^[+-]?[\d\s]*[.,][\d\s]*[.,][\d.,\s]*$/.test(typed)) return refuse('two_marks', text);
  const digits = typed.replace(/(?<=\d)\s(?=\d{3}(?!\d))/g, '').replace(',', '.');
  if (!/^[+-]?(\d+\.?\d*|\.\d+)$/.test(digits)) return refuse('not_a_number', text);
  const value = Number(digits);
  return Number.isFinite(value) ? { ok: true, value } : refuse('not_a_number', text);
}

/** One plain space between words, a plain minus, none at the ends. */
export function tidy(text: string): string {
  return text.replace(/\s+/g, ' ').replace(/−/g, '-').trim();
}

/** A refusal that quotes at most forty characters of what was typed. */
export function refuse(code: ParseProblem['code'], seen: string): { ok: false; problem: ParseProblem } {
  return { ok: false, problem: { code, seen: seen.trim().slice(0, 40) } };
}
