import { defineStore } from 'pinia';
import { v7 as uuidv7 } from 'uuid';
import { computed, shallowRef, watch } from 'vue';
import type { EditRow, RunRow } from '@/db/localStore';
import { addEdit as keepEdit, addRun as keepRun, watchRuns, type StoredRuns } from '@/db/runs';
import type { EditChange } from '@shared/schemas/edit';
import type { RawRun } from '@shared/schemas/run';
import { makeEntries, type RunEntry } from './runEntry';
import { useSession } from './useSession';

export type { EditEntry, RunEntry, Unreadable } from './runEntry';

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

  const made = computed(() => makeEntries(stored.value));
  const entries = computed(() => [...made.value.entries].sort((a, b) => b.row.made_wall_ms - a.row.made_wall_ms));
  /** Kept runs and edits this program cannot read. */
  const unreadable = computed(() => made.value.unreadable);
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

  return { entries, unreadable, entry, isLoaded, addRun, addEdit };
});
