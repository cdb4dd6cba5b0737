import { liveQuery, type Observable } from 'dexie';
import { canonicalText, digestOf } from '@shared/schemas/canonical';
import type { RawEdit } from '@shared/schemas/edit';
import type { RawRun } from '@shared/schemas/run';
import { wellFormedContent } from '@shared/schemas/wellFormed';
import { strictly, type AnalysisRow, type EditRow, type LocalStore, type RunRow, type SendInfo } from './localStore';
import { nextCreatedSeq } from './meta';

/** Sealed runs and edits of one account: put in once, never changed but for what the server says of them. */

const WAITING: Omit<SendInfo, 'created_seq'> = {
  state: 'waiting',
  receipt: null,
  refusal: null,
  author: null,
  origin: 'mine',
};

/** Where a new run belongs; both null while timing without a class. */
export interface RunPlace {
  class_id: string | null;
  bench: number | null;
}

/**
 * Keeps a sealed run, flushed to disk before the promise resolves. Keeping the same run twice is
 * harmless; another text under a known id is refused, and the kept one stays.
 */
export async function addRun(store: LocalStore, run: RawRun, place: RunPlace): Promise<RunRow> {
  const raw = canonicalText(wellFormedContent(run));
  const digest = digestOf(raw);
  const disk = strictly(store);
  return disk.transaction('rw', disk.runs, disk.meta, async () => {
    const kept = await disk.runs.get(run.id);
    if (kept) return sameText(kept, digest);
    const created_seq = await nextCreatedSeq(disk);
    const row: RunRow = {
      ...WAITING,
      ...place,
      id: run.id,
      digest,
      raw,
      created_seq,
      made_wall_ms: run.made.wall_ms,
      clock_skew_ms: null,
    };
    await disk.runs.add(row);
    return row;
  });
}

/** Keeps an edit, under the same promise as {@link addRun}. `made_seq` is given here, in one transaction with the row. */
export async function addEdit(store: LocalStore, edit: Omit<RawEdit, 'made_seq'>): Promise<EditRow> {
  const disk = strictly(store);
  return disk.transaction('rw', disk.edits, disk.meta, async () => {
    const mine = await disk.edits.where({ run_id: edit.run_id }).filter(isMine).count();
    const raw = canonicalText(wellFormedContent({ ...edit, made_seq: mine + 1 }));
    const created_seq = await nextCreatedSeq(disk);
    const row: EditRow = { ...WAITING, id: edit.id, run_id: edit.run_id, digest: digestOf(raw), raw, created_seq };
    await disk.edits.add(row);
    return row;
  });
}

export interface StoredRuns {
  runs: RunRow[];
  edits: EditRow[];
  analyses: AnalysisRow[];
}

/** Everything the screens show, told anew on every change, whichever tab made it. */
export function watchRuns(store: LocalStore): Observable<StoredRuns> {
  return liveQuery(() =>
    store.transaction('r', store.runs, store.edits, store.analyses, async () => ({
      runs: await store.runs.toArray(),
      edits: await store.edits.toArray(),
      analyses: await store.analyses.toArray(),
    })),
  );
}

function sameText<Row extends { id: string; digest: string }>(kept: Row, digest: string): Row {
  if (kept.digest !== digest) throw new Error(`${kept.id} is kept with another text; it stays as it is`);
  return kept;
}

const isMine = (row: SendInfo) => row.origin === 'mine';
