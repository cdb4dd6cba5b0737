/**
 * A text as it can be kept: without halves of characters (lone surrogates), which a phone's keyboard or a
 * length limit can leave behind. They have no UTF-8, so no canonical form holds them (RFC 8785, 3.2.2.2).
 * Where a half is taken out, white space it leaves at the ends goes too.
 *
 * @example wellFormed('windy \ud83d') // 'windy'
 */
export function wellFormed(text: string): string {
  const whole = text.replace(/\p{Cs}/gu, '');
  return whole === text ? text : whole.trim();
}

/**
 * The same JSON content with every text in it well formed. Content without halves of characters comes back as it is.
 *
 * @param content  a JSON value
 */
export function wellFormedContent<T>(content: T): T {
  return JSON.parse(JSON.stringify(content), (_key, part: unknown) =>
    typeof part === 'string' ? wellFormed(part) : part,
  ) as T;
}
