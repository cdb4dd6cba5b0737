import { analyseRun } from '@shared/analysis/analyseRun';
import type { Analysis } from '@shared/schemas/analysis';
import { digestOf } from '@shared/schemas/canonical';
import type { RawEdit } from '@shared/schemas/edit';
import { EDIT_FORMAT, EDIT_VERSION, RUN_FORMAT, RUN_VERSION } from '@shared/schemas/formats';
import type { RawRun } from '@shared/schemas/run';
import { inForce, setAside } from '@shared/timing/foldRun';
import type { AnalysisRow, EditRow, RunRow } from '@/db/localStore';
import type { StoredRuns } from '@/db/runs';

export interface EditEntry {
  row: EditRow;
  raw: RawEdit;
}

/** A run as screens show it: what was recorded, the edits over it, and what follows from both. */
export interface RunEntry {
  readonly row: RunRow;
  readonly raw: RawRun;
  /** Those the server has, in its order; then those that wait, in this device's order. */
  readonly edits: EditEntry[];
  /**
   * The edits that count. One the server refused does not, or this device would go on showing what nobody else
   * has; beside a refused run all do, for then this device alone has any of it.
   */
  readonly counted: EditEntry[];
  /** The edit in force by which the run does not count, and who made it; null while it counts. */
  readonly setAside: { reason: string; edit: EditEntry } | null;
  /** How many edits of it cannot be read here, and so do not count. */
  readonly unreadableEdits: number;
  /** Computed here, when first looked at. */
  readonly analysis: Analysis;
  /** The server's analysis of record: of these very inputs, or else its latest. */
  readonly official: AnalysisRow | null;
}

/** A kept text this program cannot read: damaged, or of a later format. It stays as it is. */
export type Unreadable = { type: 'run'; row: RunRow } | { type: 'edit'; row: EditRow };

/** Makes entries of what is kept. What cannot be read is set beside them, and takes nothing else with it. */
export function makeEntries(stored: StoredRuns): { entries: RunEntry[]; unreadable: Unreadable[] } {
  const editsOf = groupBy(stored.edits, (row) => row.run_id);
  const analysesOf = groupBy(stored.analyses, (row) => row.run_id);
  const entries = stored.runs.flatMap((row) => {
    const raw = runOf(row);
    return raw ? makeEntry(row, raw, editsOf.get(row.id) ?? [], analysesOf.get(row.id) ?? []) : [];
  });
  const unreadable: Unreadable[] = [
    ...stored.runs.filter((row) => !runOf(row)).map((row) => ({ type: 'run' as const, row })),
    ...stored.edits.filter((row) => !editOf(row)).map((row) => ({ type: 'edit' as const, row })),
  ];
  return { entries, unreadable };
}

function makeEntry(row: RunRow, raw: RawRun, editRows: EditRow[], analyses: AnalysisRow[]): RunEntry {
  const edits = editRows.sort(inForceOrder).flatMap((edit) => {
    const content = editOf(edit);
    return content ? { row: edit, raw: content } : [];
  });
  const counted = edits.filter((edit) => edit.row.state !== 'refused' || row.state === 'refused');
  const run = { digest: row.digest, content: raw };
  return {
    row,
    raw,
    edits,
    counted,
    get setAside() {
      const word = setAside(inForce(counted.map((edit) => edit.raw)));
      return word && { reason: word.reason, edit: counted.find((edit) => edit.raw.id === word.editId)! };
    },
    unreadableEdits: editRows.length - edits.length,
    get analysis() {
      return analysed(run, counted);
    },
    get official() {
      const digest = analyses.length > 1 ? analysed(run, counted).input_digest : null;
      return (
        analyses.find((analysis) => analysis.input_digest === digest) ??
        analyses.reduce<AnalysisRow | null>((a, b) => (a && a.server_seq > b.server_seq ? a : b), null)
      );
    },
  };
}

const inForceOrder = (a: EditRow, b: EditRow) =>
  (a.receipt?.server_seq ?? Infinity) - (b.receipt?.server_seq ?? Infinity) || a.created_seq - b.created_seq;

const runOf = readOnce<RawRun>(RUN_FORMAT, RUN_VERSION);
const editOf = readOnce<RawEdit>(EDIT_FORMAT, EDIT_VERSION);

/**
 * Reads a kept text, once; null when it cannot be. Bytes that are still those sealed, in a format known here, were
 * checked when they were sealed and by the server: the schema is not asked again, as a class has many runs.
 */
function readOnce<T>(format: string, version: number): (row: { digest: string; raw: string }) => T | null {
  const known = new Map<string, { raw: string; content: T | null }>();
  const read = (raw: string, digest: string): T | null => {
    if (digestOf(raw) !== digest) return null;
    try {
      const content = JSON.parse(raw) as { format?: unknown; version?: unknown } | null;
      return content?.format === format && content.version === version ? (content as T) : null;
    } catch {
      return null;
    }
  };
  return ({ raw, digest }) => {
    const before = known.get(digest);
    if (before?.raw === raw) return before.content;
    const content = read(raw, digest);
    known.set(digest, { raw, content });
    return content;
  };
}

const analyses = new Map<string, Analysis>();
function analysed(run: { digest: string; content: RawRun }, edits: EditEntry[]): Analysis {
  const key = [run.digest, ...edits.map((edit) => edit.row.digest)].join();
  const known = analyses.get(key);
  if (known) return known;
  const analysis = analyseRun({ run, edits: edits.map(({ row, raw }) => ({ digest: row.digest, content: raw })) });
  analyses.set(key, analysis);
  return analysis;
}

function groupBy<T>(rows: T[], key: (row: T) => string): Map<string, T[]> {
  const groups = new Map<string, T[]>();
  for (const row of rows) {
    const group = groups.get(key(row));
    if (group) group.push(row);
    else groups.set(key(row), [row]);
  }
  return groups;
}
