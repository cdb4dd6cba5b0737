/** Message files by their name, which is the top key: `en/pad.json` holds `pad.…`. */
export type Texts = Record<string, Record<string, unknown>>;

export function byName(files: Record<string, { default: Record<string, unknown> }>): Texts {
  return Object.fromEntries(
    Object.entries(files).map(([path, file]) => [path.slice('./en/'.length, -'.json'.length), file.default]),
  );
}
