import { z } from 'zod';
import type { Sealed } from '../analysis/analyseRun';
import { canonicalText, digestOf } from './canonical';
import { Digest, Uuid } from './common';
import type { RawEdit } from './edit';
import { lineOfBreak, lineOfValue, type JsonPath } from './locateJson';
import { plainMessage } from './plainMessage';
import { FormatError, readEdit, readRun } from './readSealed';
import { RUN_FORMAT, type RawRun } from './run';

/**
 * Runs as a file: format `swaymark-runs`, version 1. JSON, UTF-8:
 *
 * { format: 'swaymark-runs', version: 1,
 *   runs: [ { run: { id, digest, raw }, edits: [ { id, run_id, digest, raw } ] } ],
 *   digest }
 *
 * `raw` is the run or edit itself (format `swaymark-run` or `swaymark-edit`), its digest the SHA-256 of its
 * canonical text, so white space in the file does not matter. Edits stand in the order they count. The file's
 * digest is that of the canonical text of `runs`. Nothing computed is in it: analyses are made anew.
 */
export const RUN_FILE_FORMAT = 'swaymark-runs';
export const RUN_FILE_VERSION = 1;

/** Any JSON object; what is in it is read by the format it names. */
const Raw = z.record(z.string(), z.unknown());

export const RunFile = z.strictObject({
  format: z.literal(RUN_FILE_FORMAT),
  version: z.literal(RUN_FILE_VERSION),
  runs: z.array(
    z.strictObject({
      run: z.strictObject({ id: Uuid, digest: Digest, raw: Raw }),
      edits: z.array(z.strictObject({ id: Uuid, run_id: Uuid, digest: Digest, raw: Raw })),
    }),
  ),
  digest: Digest,
});
export type RunFile = z.infer<typeof RunFile>;

/** A run with its edits, as the analysis takes them. */
export interface RunWithEdits {
  run: Sealed<RawRun>;
  edits: Sealed<RawEdit>[];
}

/** A text that cannot be read as runs. `line` counts from 1; `field` is where in the JSON, like `runs.0.run.raw.note`. */
export class RunFileError extends Error {
  override readonly name = 'RunFileError';
  constructor(
    message: string,
    readonly line: number,
    readonly field: string,
  ) {
    super(message);
  }
}

/**
 * The text of a run file.
 *
 * @param entries  runs with their edits in the order they count
 * @returns        JSON that `readRunFile` gives back as it was
 */
export function exportRuns(entries: readonly RunWithEdits[]): string {
  const runs = entries.map(({ run, edits }) => ({
    run: { id: run.content.id, digest: run.digest, raw: run.content },
    edits: edits.map(({ content, digest }) => ({ id: content.id, run_id: content.run_id, digest, raw: content })),
  }));
  const digest = digestOf(canonicalText(runs));
  return `${JSON.stringify({ format: RUN_FILE_FORMAT, version: RUN_FILE_VERSION, runs, digest }, null, 1)}\n`;
}

/**
 * Reads runs from a text: a run file, one plain run (`swaymark-run`), or a list of plain runs.
 *
 * @returns  the runs in the order of the text, each with its edits
 * @throws {RunFileError} the first thing that does not hold, with line and field
 */
export function readRunFile(text: string): RunWithEdits[] {
  const plain = text.replace(/^\uFEFF/, '');
  const reader = new Reader(plain);
  const content = reader.parse();
  if (Array.isArray(content)) return content.map((run, i) => ({ run: reader.plainRun(run, [i]), edits: [] }));
  const format = formatOf(content);
  if (format === RUN_FORMAT) return [{ run: reader.plainRun(content, []), edits: [] }];
  if (format === RUN_FILE_FORMAT) return reader.runFile(content as Record<string, unknown>);
  throw reader.error(
    `This holds no runs: ${RUN_FILE_FORMAT}, ${RUN_FORMAT} or a list of those is wanted, ${sawFormat(format)}.`,
    ['format'],
  );
}

/** Reads one text and knows where in it things stand. */
class Reader {
  constructor(private readonly text: string) {}

  error(message: string, path: JsonPath): RunFileError {
    return new RunFileError(message, lineOfValue(this.text, path), path.join('.'));
  }

  parse(): unknown {
    const line = lineOfBreak(this.text);
    if (line === undefined) return JSON.parse(this.text);
    const seen = this.text.trim() === '' ? 'This is empty' : 'This is not whole JSON: it may have been cut off here';
    throw new RunFileError(`${seen}.`, line, '');
  }

  runFile(content: Record<string, unknown>): RunWithEdits[] {
    if (content.version !== RUN_FILE_VERSION) {
      throw this.error(
        `This file was written in version ${String(content.version).slice(0, 40)} of ${RUN_FILE_FORMAT}, and version ${RUN_FILE_VERSION} is read here. Update the older of the two programs; the file is safe as it is.`,
        ['version'],
      );
    }
    const checked = RunFile.safeParse(content, { error: plainMessage });
    if (!checked.success) {
      const { path, message } = checked.error.issues[0]!;
      throw this.error(message, path as JsonPath);
    }
    const entries = checked.data.runs.map(({ run, edits }, i): RunWithEdits => {
      const at = ['runs', i, 'run'];
      const sealed = { digest: run.digest, content: this.read(readRun, run.raw, run.digest, at) };
      this.mustBe(run.id, sealed.content.id, [...at, 'id']);
      return { run: sealed, edits: edits.map((edit, k) => this.edit(edit, run.id, ['runs', i, 'edits', k])) };
    });
    if (digestOf(this.canonical(checked.data.runs, ['runs'])) !== checked.data.digest) {
      throw this.error('The digest does not fit the runs: some were added, lost or moved after it was written.', [
        'digest',
      ]);
    }
    return entries;
  }

  plainRun(content: unknown, at: JsonPath): Sealed<RawRun> {
    const format = formatOf(content);
    if (format !== RUN_FORMAT)
      throw this.error(`A run (${RUN_FORMAT}) is wanted here, ${sawFormat(format)}.`, [...at, 'format']);
    const digest = digestOf(this.canonical(content, at));
    return { digest, content: this.read(readRun, content, digest, [...at], []) };
  }

  private edit({ id, run_id, digest, raw }: RunFile['runs'][number]['edits'][number], runId: string, at: JsonPath) {
    const content = this.read(readEdit, raw, digest, at);
    this.mustBe(id, content.id, [...at, 'id']);
    this.mustBe(run_id, content.run_id, [...at, 'run_id']);
    this.mustBe(run_id, runId, [...at, 'run_id']);
    return { digest, content };
  }

  private read<T>(
    read: (text: string, digest: string) => T,
    raw: unknown,
    digest: string,
    at: JsonPath,
    inside: JsonPath = ['raw'],
  ): T {
    const within = [...at, ...inside];
    const rawText = this.canonical(raw, within);
    try {
      return read(rawText, digest);
    } catch (error) {
      if (!(error instanceof FormatError)) throw error;
      const [field] = error.fields;
      if (field) throw this.error(field.message, [...within, ...pathOf(field.path)]);
      const own = {
        digest_differs: ['digest'],
        unknown_version: [...inside, 'version'],
        unknown_format: [...inside, 'format'],
      };
      throw this.error(error.message, [...at, ...(own[error.code as keyof typeof own] ?? inside)]);
    }
  }

  private canonical(content: unknown, at: JsonPath): string {
    try {
      return canonicalText(content);
    } catch {
      throw this.error('A text in here has half a character (a lone surrogate) and cannot be kept.', at);
    }
  }

  private mustBe(said: string, is: string, at: JsonPath): void {
    if (said !== is) throw this.error(`This says ${said}, and what it stands for has ${is}.`, at);
  }
}

function formatOf(content: unknown): string | undefined {
  const format = typeof content === 'object' && content !== null && 'format' in content ? content.format : undefined;
  return typeof format === 'string' ? format : undefined;
}

const sawFormat = (format: string | undefined) =>
  format === undefined ? 'and nothing says what this is' : `not “${format.slice(0, 40)}”`;

function pathOf(path: string): JsonPath {
  return path === '' ? [] : path.split('.').map((step) => (/^\d+$/.test(step) ? Number(step) : step));
}
