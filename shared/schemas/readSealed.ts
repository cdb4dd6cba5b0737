import type { ZodType } from 'zod';
import { canonicalText, digestOf } from './canonical';
import { EDIT_FORMAT, EDIT_VERSION, RawEdit } from './edit';
import { MAX_RAW_BYTES } from './limits';
import { plainMessage } from './plainMessage';
import { RawRun, RUN_FORMAT, RUN_VERSION } from './run';

export type FormatCode =
  'too_large' | 'digest_differs' | 'not_json' | 'unknown_format' | 'unknown_version' | 'fields' | 'not_canonical';

/** A text that cannot be taken as a run or an edit. `code` is stable, `message` is for a person. */
export class FormatError extends Error {
  override readonly name = 'FormatError';
  constructor(
    readonly code: FormatCode,
    message: string,
    /** For code `fields`: where, and what is wanted there; the first twenty. */
    readonly fields: { path: string; message: string }[] = [],
  ) {
    super(message);
  }
}

/**
 * Reads the canonical text of a run.
 *
 * @param rawText  the text as it came
 * @param digest   what its SHA-256 is said to be
 * @returns        the run, exactly what the text says
 * @throws {FormatError} the first thing that does not hold: size, digest, JSON, format, version, fields, canonical form
 */
export function readRun(rawText: string, digest: string): RawRun {
  return read(rawText, digest, { what: 'run', schema: RawRun, format: RUN_FORMAT, version: RUN_VERSION });
}

/** Reads the canonical text of an edit; otherwise like `readRun`. */
export function readEdit(rawText: string, digest: string): RawEdit {
  return read(rawText, digest, { what: 'edit', schema: RawEdit, format: EDIT_FORMAT, version: EDIT_VERSION });
}

/** More than this help nobody. */
const MOST_FIELDS = 20;

interface Wanted<T> {
  what: 'run' | 'edit';
  schema: ZodType<T>;
  format: string;
  version: number;
}

function read<T>(rawText: string, digest: string, { what, schema, format, version }: Wanted<T>): T {
  // A character takes one byte at least, so the cheap count comes first.
  if (rawText.length > MAX_RAW_BYTES || new TextEncoder().encode(rawText).length > MAX_RAW_BYTES) {
    throw new FormatError('too_large', `This ${what} is larger than ${MAX_RAW_BYTES / 1000} kB. Split it up.`);
  }
  if (digestOf(rawText) !== digest) {
    throw new FormatError(
      'digest_differs',
      `The digest does not fit this ${what}'s text: a part was lost or changed. Send it again.`,
    );
  }
  const content = parse(rawText, what);
  if (content.format !== format) {
    throw new FormatError(
      'unknown_format',
      `This says it is “${shown(content.format)}”, and a ${format} is wanted here.`,
    );
  }
  if (content.version !== version) {
    throw new FormatError(
      'unknown_version',
      `This ${what} was written in version ${shown(content.version)} of its format, and version ${version} is read here. Update the older of the two programs; the ${what} stays safe where it is.`,
    );
  }
  const checked = schema.safeParse(content, { error: plainMessage });
  if (!checked.success) {
    const fields = checked.error.issues
      .slice(0, MOST_FIELDS)
      .map((issue) => ({ path: issue.path.join('.'), message: issue.message }));
    throw new FormatError('fields', `Some fields of this ${what} are not as its format says: see fields.`, fields);
  }
  // Compared after the schema, so that a text the schema would tidy up (spaces around a note) is refused too.
  if (canonicalOf(checked.data) !== rawText) {
    throw new FormatError(
      'not_canonical',
      `This ${what}'s text is not in canonical form (RFC 8785), so its digest would not be the only one.`,
    );
  }
  return checked.data;
}

function parse(rawText: string, what: string): Record<string, unknown> {
  let content: unknown;
  try {
    content = JSON.parse(rawText);
  } catch {
    throw new FormatError(
      'not_json',
      `This ${what}'s text is not whole JSON: it may have been cut off. Send it again.`,
    );
  }
  if (typeof content !== 'object' || content === null || Array.isArray(content)) {
    throw new FormatError('not_json', `This ${what}'s text is JSON, but not an object.`);
  }
  return content as Record<string, unknown>;
}

/** A lone surrogate has no UTF-8 text; with one in it a text is no canonical form of anything (RFC 8785, 3.2.2.2). */
function canonicalOf(content: unknown): string | undefined {
  try {
    const text = canonicalText(content);
    // Canonical text spells out nothing but control signs and lone surrogates; an escaped backslash is not such a spelling.
    return text.replaceAll('\\\\', '').includes('\\ud') ? undefined : text;
  } catch {
    return undefined;
  }
}

/** Only plain content: anything else may have a text of any length, or none. */
function shown(content: unknown): string {
  return typeof content === 'string' || typeof content === 'number' ? String(content).slice(0, 40) : typeof content;
}
