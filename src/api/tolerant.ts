import type { z } from 'zod';

/**
 * Reads what a server says that may be newer than this page: fields unknown here are passed over, at any
 * depth, and everything known must be as the schema says.
 *
 * @param schema   strict, as shared with the server
 * @param content  parsed JSON, not touched
 * @returns        what the schema makes of it, or undefined when it is something else
 */
export function readTolerantly<T>(schema: z.ZodType<T>, content: unknown): T | undefined {
  let known = content;
  for (;;) {
    const read = schema.safeParse(known);
    if (read.success) return read.data;
    const unknown = read.error.issues.filter((issue) => issue.code === 'unrecognized_keys');
    if (unknown.length === 0) return undefined;
    known = unknown.reduce((rest, { path, keys }) => without(rest, path, keys), known);
  }
}

function without(content: unknown, path: readonly PropertyKey[], keys: readonly string[]): unknown {
  const [step, ...deeper] = path;
  if (Array.isArray(content))
    return content.map((part: unknown, i) => (i === step ? without(part, deeper, keys) : part));
  const parts = Object.entries(content as Record<string, unknown>);
  if (step === undefined) return Object.fromEntries(parts.filter(([key]) => !keys.includes(key)));
  return Object.fromEntries(parts.map(([key, part]) => [key, key === step ? without(part, deeper, keys) : part]));
}
