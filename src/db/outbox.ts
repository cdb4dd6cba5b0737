import { liveQuery, type Observable } from 'dexie';
import type { SyncItem, Verdict } from '@shared/schemas/sync';
import type { EditRow, LocalStore, RunRow, SendInfo } from './localStore';

/** What has no receipt yet, and what the server said of it. There is no "sending" on disk: nothing can be stuck in it. */

/**
 * Runs and edits that wait for a receipt, oldest first.
 *
 * @param except  ids left out of this round
 * @param most    how many at most
 */
export async function outbox(store: LocalStore, except: ReadonlySet<string>, most: number): Promise<SyncItem[]> {
  const [runs, edits] = await store.transaction('r', store.runs, store.edits, () =>
    Promise.all([waitingIn<RunRow>(store, 'runs', except, most), waitingIn<EditRow>(store, 'edits', except, most)]),
  );
  return [...runs.map((row) => ({ seq: row.created_seq, item: runItem(row) })), ...edits.map(editEntry)]
    .sort((a, b) => a.seq - b.seq)
    .slice(0, most)
    .map(({ item }) => item);
}

/** How many runs and edits wait for a receipt, and how many were not taken, told anew on every change. */
export function watchOutbox(store: LocalStore): Observable<{ waiting: number; refused: number }> {
  return liveQuery(async () => ({ waiting: await count(store, 'waiting'), refused: await count(store, 'refused') }));
}

export const countWaiting = (store: LocalStore): Promise<number> => count(store, 'waiting');

async function count(store: LocalStore, state: SendInfo['state']): Promise<number> {
  const [runs, edits] = await Promise.all([store.runs.where({ state }).count(), store.edits.where({ state }).count()]);
  return runs + edits;
}

/**
 * Writes the server's verdicts down. Only a receipt that names an item's id and its digest marks it
 * received; a verdict about other bytes, or about something not here, changes nothing.
 *
 * @returns ids that are settled: received, or refused for good
 */
export function applyVerdicts(store: LocalStore, verdicts: Verdict[]): Promise<Set<string>> {
  return store.transaction('rw', store.runs, store.edits, async () => {
    const settled = new Set<string>();
    for (const verdict of verdicts) {
      const change = outcome(verdict);
      if (!change) continue;
      const changed = await tableOf(store, verdict.type)
        .where({ id: verdict.id })
        .filter((row) => row.digest === verdict.digest && row.state !== 'received')
        .modify(change);
      if (changed === 1) settled.add(verdict.id);
    }
    return settled;
  });
}

/** Sets an item aside that the server will not even read, with its reason; the rest go on. */
export async function park(
  store: LocalStore,
  item: SyncItem,
  refusal: { code: string; message: string },
): Promise<void> {
  await tableOf(store, item.type)
    .where({ id: item.id })
    .filter((row) => row.digest === item.digest && row.state === 'waiting')
    .modify({ state: 'refused', refusal });
}

/** An edit of a run the server will not take would wait for ever: it is set aside with its run's reason. */
export function parkEditsOfRefusedRuns(store: LocalStore): Promise<void> {
  return store.transaction('rw', store.runs, store.edits, async () => {
    const refused = await store.runs.where({ state: 'refused' }).toArray();
    for (const { id, refusal } of refused)
      await store.edits
        .where({ run_id: id })
        .filter((edit) => edit.state === 'waiting')
        .modify({ state: 'refused', refusal });
  });
}

/** True while a run made here was received and the server's analysis of it has not come yet. */
export async function awaitsAnalysis(store: LocalStore): Promise<boolean> {
  const received = await store.runs
    .where({ state: 'received' })
    .filter((row) => row.origin === 'mine')
    .primaryKeys();
  const analysed = new Set((await store.analyses.orderBy('run_id').uniqueKeys()) as string[]);
  return received.some((id) => !analysed.has(id));
}

/** Puts a refused item back in the queue, for a try by hand; a run with its edits, an edit with its refused run. */
export function sendOnceMore(store: LocalStore, type: 'run' | 'edit', id: string): Promise<void> {
  const isRefused = (row: SendInfo) => row.state === 'refused';
  const again = { state: 'waiting', refusal: null } as const;
  return store.transaction('rw', store.runs, store.edits, async () => {
    const runId = type === 'run' ? id : (await store.edits.get(id))?.run_id;
    const runs = await store.runs.where({ id: runId }).filter(isRefused).modify(again);
    const edits = runs > 0 ? store.edits.where({ run_id: runId }) : store.edits.where({ id });
    await edits.filter(isRefused).modify(again);
  });
}

function outcome(verdict: Verdict): Partial<SendInfo> | null {
  switch (verdict.verdict) {
    case 'stored':
    case 'already':
      return { state: 'received', receipt: verdict.receipt, refusal: null };
    case 'conflict':
    case 'refused':
      return { state: 'refused', refusal: { code: refusalCode(verdict), message: verdict.message } };
    case 'later':
      return null;
  }
}

const refusalCode = (verdict: { verdict: string; code: string }) =>
  verdict.verdict === 'conflict' ? 'conflict' : verdict.code;

type SendTable = { where(key: object): { filter(test: (row: RunRow | EditRow) => boolean): Changeable } };
interface Changeable {
  modify(change: Partial<SendInfo>): PromiseLike<number>;
}
const tableOf = (store: LocalStore, type: 'run' | 'edit') =>
  (type === 'run' ? store.runs : store.edits) as unknown as SendTable;

async function waitingIn<Row extends SendInfo & { id: string }>(
  store: LocalStore,
  table: 'runs' | 'edits',
  except: ReadonlySet<string>,
  most: number,
): Promise<Row[]> {
  const waiting = (await store.table(table).where({ state: 'waiting' }).sortBy('created_seq')) as Row[];
  return waiting.filter((row) => !except.has(row.id)).slice(0, most);
}

const runItem = (row: RunRow): SyncItem => ({
  type: 'run',
  id: row.id,
  digest: row.digest,
  raw: row.raw,
  class_id: row.class_id,
  bench: row.bench,
});
const editEntry = (row: EditRow) => ({
  seq: row.created_seq,
  item: { type: 'edit', id: row.id, run_id: row.run_id, digest: row.digest, raw: row.raw } satisfies SyncItem,
});
