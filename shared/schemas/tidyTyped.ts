/**
 * Codes and PINs are read out in groups and typed with spaces or dashes, as phones put them in.
 *
 * @returns  what was typed without white space and without dashes of any kind
 * @example withoutSpacing(' 204\u2011611') // '204611'
 */
export const withoutSpacing = (typed: string) => typed.replace(/[\s\p{Pd}\u00ad\u2212\u200b\u2060]/gu, '');
