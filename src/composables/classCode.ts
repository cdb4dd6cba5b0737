import { withoutSpacing } from '@shared/schemas/tidyTyped';

/**
 * True for six letters or digits, however they are cased, spaced or dashed. Which of them the server gives
 * out is its own to know: a code with a letter it never uses gets its words, not ours.
 */
export function looksLikeClassCode(typed: string): boolean {
  return /^[0-9A-Z]{6}$/.test(tidyClassCode(typed));
}

export const tidyClassCode = (typed: string): string => withoutSpacing(typed).toUpperCase();
