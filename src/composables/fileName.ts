/**
 * A file's name from words and the day, safe on every system and without anybody's name in it unless the words are one.
 *
 * @example fileName(['runs', 'Physics 10 blue'], 1_930_000_000_000, 'json') // 'swaymark-runs-physics-10-blue-2031-02-27.json'
 */
export function fileName(words: string[], wall_ms: number, ending: string): string {
  const day = new Date(wall_ms).toISOString().slice(0, 10);
  const parts = words.map((word) =>
    word
      .normalize('NFKD')
      .toLowerCase()
      .replace(/[^\p{L}\p{N}]+/gu, '-')
      .replace(/^-+|-+$/g, '')
      .slice(0, 40),
  );
  return `${['swaymark', ...parts.filter((part) => part !== ''), day].join('-')}.${ending}`;
}
