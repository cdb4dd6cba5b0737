/** Steps from the top of a JSON text to a value: keys and indexes. */
export type JsonPath = readonly (string | number)[];

/** Nesting no file of ours comes near. */
const DEEPEST = 200;

/**
 * Line of a value in a JSON text, for messages people can follow with an editor.
 *
 * @param text  whole JSON
 * @param path  to the value; when a step is not there, the line of what was reached
 * @returns     from 1
 * @example lineOfValue('{\n "a": [1,\n 2] }', ['a', 1]) // 3
 */
export function lineOfValue(text: string, path: JsonPath): number {
  let reached = 0;
  // Values are met from the outside in, so the last on the way is the deepest.
  scan(text, (at, found) => {
    if (found.length <= path.length && found.every((step, i) => step === path[i])) reached = at;
  });
  return lineAt(text, reached);
}

/**
 * Line at which a text stops being JSON.
 *
 * @returns  from 1; the last line when the text was cut off; undefined when it is whole
 */
export function lineOfBreak(text: string): number | undefined {
  const broken = scan(text, () => undefined);
  return broken === undefined ? undefined : lineAt(text, broken);
}

function lineAt(text: string, offset: number): number {
  return text.slice(0, offset).split('\n').length;
}

const BLANK = /[ \t\n\r]*/y;
const TEXT = /"(?:[^"\\\u0000-\u001f]|\\(?:["\\/bfnrt]|u[0-9a-fA-F]{4}))*"/y; // eslint-disable-line no-control-regex
const PLAIN = /-?(?:0|[1-9]\d*)(?:\.\d+)?(?:[eE][+-]?\d+)?|true|false|null/y;

/** Walks the text value by value; gives the offset at which it breaks off, if it does. */
function scan(text: string, visit: (offset: number, path: JsonPath) => void): number | undefined {
  let at = 0;
  const path: (string | number)[] = [];
  const match = (pattern: RegExp) => {
    pattern.lastIndex = at;
    const found = pattern.exec(text)?.[0];
    if (found !== undefined) at += found.length;
    return found;
  };
  const take = (sign: string) => {
    match(BLANK);
    if (text[at] !== sign) return false;
    at += 1;
    return true;
  };
  const list = (close: string, item: (index: number) => boolean): boolean => {
    if (take(close)) return true;
    for (let index = 0; ; index += 1) {
      if (!item(index)) return false;
      if (take(close)) return true;
      if (!take(',')) return false;
    }
  };
  const inside = (step: string | number) => {
    path.push(step);
    const isWhole = value();
    path.pop();
    return isWhole;
  };
  const member = () => {
    match(BLANK);
    const key = match(TEXT);
    return key !== undefined && take(':') && inside(JSON.parse(key) as string);
  };
  function value(): boolean {
    match(BLANK);
    visit(at, path);
    if (path.length > DEEPEST) return false;
    if (take('{')) return list('}', member);
    if (take('[')) return list(']', inside);
    return (match(TEXT) ?? match(PLAIN)) !== undefined;
  }
  if (!value()) return at;
  match(BLANK);
  return at === text.length ? undefined : at;
}
