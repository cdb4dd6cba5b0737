import { defineStore } from 'pinia';
import { v7 as uuidv7 } from 'uuid';
import { computed, shallowRef, watch } from 'vue';
import type { AnalysisRow, EditRow, RunRow } from '@/db/localStore';
import { addEdit as keepEdit, addRun as keepRun, watchRuns, type StoredRuns } from '@/db/runs';
import type { Analysis } from '@shared/schemas/analysis';
import type { EditChange, RawEdit } from '@shared/schemas/edit';
import type { RawRun } from '@shared/schemas/run';
import { analyseRun } from '@shared/analysis/analyseRun';
import { useSession } from './useSession';

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
  /** Computed here, when first looked at. */
  readonly analysis: Analysis;
  /** The server's analysis of record: of these very inputs, or else its latest. */
  readonly official: AnalysisRow | null;
}

const NOTHING: StoredRuns = { runs: [], edits: [], analyses: [] };

/** Every run of the open store, newest first, live: whichever tab, recording or sync changes them. */
export const useRuns = defineStore('runs', () => {
  const session = useSession();
  const stored = shallowRef<StoredRuns>(NOTHING);
  /** False until the open store was read for the first time. */
  const isLoaded = shallowRef(false);

  watch(
    () => session.store,
    (store, _before, onCleanup) => {
      stored.value = NOTHING;
      isLoaded.value = false;
      if (!store) return;
      const watching = watchRuns(store).subscribe((now) => {
        stored.value = now;
        isLoaded.value = true;
      });
      onCleanup(() => watching.unsubscribe());
    },
    { immediate: true },
  );

  const entries = computed<RunEntry[]>(() => {
    const editsOf = groupBy(stored.value.edits, (row) => row.run_id);
    const analysesOf = groupBy(stored.value.analyses, (row) => row.run_id);
    return stored.value.runs
      .map((row) => makeEntry(row, editsOf.get(row.id) ?? [], analysesOf.get(row.id) ?? []))
      .sort((a, b) => b.row.made_wall_ms - a.row.made_wall_ms);
  });
  const byId = computed(() => new Map(entries.value.map((entry) => [entry.row.id, entry])));
  const entry = (id: string): RunEntry | undefined => byId.value.get(id);

  /** Keeps a sealed run. Once this resolves it is on disk, and it goes out by itself. */
  async function addRun(raw: RawRun): Promise<RunRow> {
    const { me } = session;
    const place = me?.kind === 'student' ? { class_id: me.class.id, bench: me.bench } : { class_id: null, bench: null };
    const row = await keepRun(openStore(), raw, place);
    if (!byId.value.has(row.id)) stored.value = { ...stored.value, runs: [...stored.value.runs, row] };
    return row;
  }

  /** Lays an edit over a run, with a reason. */
  async function addEdit(runId: string, change: EditChange, reason: string): Promise<EditRow> {
    const row = await keepEdit(openStore(), {
      format: 'swaymark-edit',
      version: 1,
      id: uuidv7(),
      run_id: runId,
      made_wall_ms: Date.now(),
      reason: reason.trim(),
      change,
    });
    if (!stored.value.edits.some(({ id }) => id === row.id))
      stored.value = { ...stored.value, edits: [...stored.value.edits, row] };
    return row;
  }

  function openStore() {
    if (!session.store) throw new Error('no store is open yet: wait for useSession().ready');
    return session.store;
  }

  return { entries, entry, isLoaded, addRun, addEdit };
});

function makeEntry(row: RunRow, editRows: EditRow[], analyses: AnalysisRow[]): RunEntry {
  const edits = editRows.sort(inForceOrder).map((edit) => ({ row: edit, raw: parsed<RawEdit>(edit) }));
  return {
    row,
    edits,
    get raw() {
      return parsed<RawRun>(row);
    },
    get analysis() {
      return analysed(row, edits);
    },
    get official() {
      const digest = analyses.length > 1 ? analysed(row, edits).input_digest : null;
      return (
        analyses.find((analysis) => analysis.input_digest === digest) ??
        analyses.reduce<AnalysisRow | null>((a, b) => (a && a.server_seq > b.server_seq ? a : b), null)
      );
    },
  };
}

const inForceOrder = (a: EditRow, b: EditRow) =>
  (a.receipt?.server_seq ?? Infinity) - (b.receipt?.server_seq ?? Infinity) || a.created_seq - b.created_seq;

/** Texts never change under a digest, so neither does what follows from them. */
const parsedTexts = new Map<string, unknown>();
function parsed<T>(row: { digest: string; raw: string }): T {
  if (!parsedTexts.has(row.digest)) parsedTexts.set(row.digest, JSON.parse(row.raw));
  return parsedTexts.get(row.digest) as T;
}

const analyses = new Map<string, Analysis>();
function analysed(row: RunRow, edits: EditEntry[]): Analysis {
  const key = [row.digest, ...edits.map((edit) => edit.row.digest)].join();
  const known = analyses.get(key);
  if (known) return known;
  const analysis = analyseRun({
    run: { digest: row.digest, content: parsed<RawRun>(row) },
    edits: edits.map((edit) => ({ digest: edit.row.digest, content: edit.raw })),
  });
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
