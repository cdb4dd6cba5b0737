import type { Analysis } from '@shared/schemas/analysis';
import { digestOf } from '@shared/schemas/canonical';
import type { FeedAnswer, FeedItem } from '@shared/schemas/sync';
import type { EditRow, LocalStore, RunRow, SendInfo } from './localStore';
import { readMeta, writeMeta } from './meta';

/** What comes back from the server. Applying the same answer twice leaves the store as once. */

export async function feedCursor(store: LocalStore): Promise<number> {
  return (await readMeta<number>(store, 'cursor')) ?? 0;
}

/** A page of the feed, and what of it could not be understood by the version of the app that read it. */
export type ReadFeed = FeedAnswer & { reader: string; not_understood: number[] };

/** Where the feed held the first thing that a reader did not understand. */
interface NotUnderstood {
  reader: string;
  before: number;
}

/**
 * Writes a page of the feed and its cursor down, in one transaction. An item whose text is damaged, or not
 * its own, is passed over; a text kept here is never replaced. What this version of the app does not
 * understand is passed over and remembered: the first page that another version reads sets the cursor back to it.
 *
 * @returns true when the server's epoch changed: everything made here waits again, and the feed starts over
 */
export function applyFeed(store: LocalStore, page: ReadFeed): Promise<boolean> {
  return store.transaction('rw', store.runs, store.edits, store.analyses, store.meta, async () => {
    const changed = await followEpoch(store, page.server_epoch);
    for (const item of page.items) await applyItem(store, item);
    if (!changed) await writeMeta(store, 'cursor', await cursorAfter(store, page));
    return changed;
  });
}

async function cursorAfter(store: LocalStore, { reader, not_understood: [first], cursor }: ReadFeed): Promise<number> {
  const known = await readMeta<NotUnderstood>(store, 'not_understood');
  if (known && known.reader !== reader) {
    await store.meta.delete('not_understood');
    return Math.min(cursor, known.before);
  }
  if (first !== undefined && !(known && known.before < first))
    await writeMeta(store, 'not_understood', { reader, before: first - 1 } satisfies NotUnderstood);
  return cursor;
}

/** Notes which life of the server answered; see {@link applyFeed} for what a new one does. */
export function noteEpoch(store: LocalStore, epoch: string): Promise<boolean> {
  return store.transaction('rw', store.runs, store.edits, store.meta, () => followEpoch(store, epoch));
}

/** Analyses that came with an answer to a sync request; the feed will bring them again, with their number. */
export function keepEarlyAnalyses(store: LocalStore, analyses: Analysis[]): Promise<void> {
  return store.transaction('rw', store.analyses, async () => {
    for (const analysis of analyses) {
      const key: [string, string] = [analysis.run_id, analysis.input_digest];
      if (await store.analyses.get(key)) continue;
      await store.analyses.add({ run_id: key[0], input_digest: key[1], server_seq: 0, analysis });
    }
  });
}

/** A server put back from an older backup has a new epoch: it may lack what it once gave receipts for. */
async function followEpoch(store: LocalStore, epoch: string): Promise<boolean> {
  const known = await readMeta<string>(store, 'server_epoch');
  if (known === epoch) return false;
  await writeMeta(store, 'server_epoch', epoch);
  if (known === undefined) return false;
  const again = { state: 'waiting', receipt: null } as const;
  const isMineReceived = (row: SendInfo) => row.origin === 'mine' && row.state === 'received';
  await store.runs.filter(isMineReceived).modify(again);
  await store.edits.filter(isMineReceived).modify(again);
  await writeMeta(store, 'cursor', 0);
  await store.meta.delete('not_understood');
  return true;
}

async function applyItem(store: LocalStore, item: FeedItem): Promise<void> {
  if (item.type === 'run') await applyRun(store, item);
  else if (item.type === 'edit') await applyEdit(store, item);
  else
    await store.analyses.put({
      run_id: item.analysis.run_id,
      input_digest: item.analysis.input_digest,
      server_seq: item.seq,
      analysis: item.analysis,
    });
}

async function applyRun(store: LocalStore, item: Extract<FeedItem, { type: 'run' }>): Promise<void> {
  const content = sealedContent(item);
  const kept = await store.runs.get(item.id);
  if (!content || (kept && kept.digest !== item.digest)) return;
  const row: RunRow = {
    ...fromServer(item, kept),
    id: item.id,
    class_id: item.class_id,
    bench: item.bench,
    made_wall_ms: kept?.made_wall_ms ?? content.made?.wall_ms ?? item.receipt.received_wall_ms,
    clock_skew_ms: item.clock_skew_ms,
  };
  await store.runs.put(row);
}

async function applyEdit(store: LocalStore, item: Extract<FeedItem, { type: 'edit' }>): Promise<void> {
  const kept = await store.edits.get(item.id);
  if (!sealedContent(item) || (kept && kept.digest !== item.digest)) return;
  const row: EditRow = { ...fromServer(item, kept), id: item.id, run_id: kept?.run_id ?? item.run_id };
  await store.edits.put(row);
}

type Sent = Exclude<FeedItem, { type: 'analysis' }>;
const fromServer = (item: Sent, kept: RunRow | EditRow | undefined): SendInfo & Pick<RunRow, 'digest' | 'raw'> => ({
  state: 'received',
  created_seq: kept?.created_seq ?? 0,
  receipt: item.receipt,
  refusal: null,
  author: item.author,
  origin: kept?.origin ?? 'feed',
  digest: item.digest,
  raw: kept?.raw ?? item.raw,
});

/** What the item's text says, as far as it is looked at here; null when its bytes are not those sealed under its id. */
function sealedContent(item: Sent): { id: string; made?: { wall_ms?: number } } | null {
  if (digestOf(item.raw) !== item.digest) return null;
  try {
    const content = JSON.parse(item.raw) as { id: string; made?: { wall_ms?: number } } | null;
    return content?.id === item.id ? content : null;
  } catch {
    return null;
  }
}
