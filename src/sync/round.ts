import { ApiError } from '@/api/ApiError';
import type { fetchFeed, sendBatch } from '@/api/sync';
import { applyFeed, feedCursor, keepEarlyAnalyses, noteEpoch } from '@/db/feed';
import type { LocalStore } from '@/db/localStore';
import { writeMeta } from '@/db/meta';
import { applyVerdicts, awaitsAnalysis, countWaiting, outbox, park, parkEditsOfRefusedRuns } from '@/db/outbox';
import { MAX_BATCH_ITEMS } from '@shared/schemas/limits';
import type { SyncItem } from '@shared/schemas/sync';
import { fillBatch } from './fillBatch';

/** One round: send what waits, then fetch what is new. Nothing here marks anything but by a receipt. */

export interface RoundParts {
  store: LocalStore;
  deviceId: string;
  api: { sendBatch: typeof sendBatch; fetchFeed: typeof fetchFeed };
  wallNow: () => number;
  /**
   * Makes sure the server takes this browser for the store's owner: people share phones, tabs share cookies.
   * False when the store may not be sent now.
   * @throws {ApiError} signed_out and the network's
   */
  isOwner: () => Promise<boolean>;
  /** Told when a batch leaves, for the words on the screen. */
  onSending: () => void;
}

/**
 * done: all sent and fetched; `expectsMore` while analyses are still being made. later: something still
 * waits. cannot_reach, signed_out: see ApiError. not_owner: another account is signed in here.
 * storage_failed: the phone's own storage gave an error or no answer.
 */
export type RoundOutcome =
  | { kind: 'done'; sent: number; expectsMore: boolean }
  | { kind: 'later'; sent: number }
  | { kind: 'cannot_reach'; error: ApiError }
  | { kind: 'signed_out' }
  | { kind: 'not_owner' }
  | { kind: 'storage_failed' };

const FEED_PAGE = 200;

export async function syncRound(parts: RoundParts): Promise<RoundOutcome> {
  try {
    if (!(await parts.isOwner())) return { kind: 'not_owner' };
    let sent = 0;
    // A new epoch puts receipted items back in the queue, so sending comes again after the feed.
    do sent += await sendWaiting(parts);
    while (await fetchNew(parts));
    await writeMeta(parts.store, 'last_contact_wall_ms', parts.wallNow());
    if ((await countWaiting(parts.store)) > 0) return { kind: 'later', sent };
    return { kind: 'done', sent, expectsMore: await awaitsAnalysis(parts.store) };
  } catch (cause) {
    if (!(cause instanceof ApiError)) throw cause;
    return cause.kind === 'signed_out' ? { kind: 'signed_out' } : { kind: 'cannot_reach', error: cause };
  }
}

/** Sends until nothing is left that was not tried in this round; what is sealed meanwhile goes along. */
async function sendWaiting(parts: RoundParts): Promise<number> {
  const tried = new Set<string>();
  let settled = 0;
  for (;;) {
    await parkEditsOfRefusedRuns(parts.store);
    const batch = fillBatch(await outbox(parts.store, tried, MAX_BATCH_ITEMS));
    if (batch.length === 0) return settled;
    parts.onSending();
    settled += await sendHalving(parts, batch);
    for (const item of batch) tried.add(item.id);
  }
}

/** One bad item must not hold the others: a batch the server will not read is sent in halves, down to one. */
async function sendHalving(parts: RoundParts, items: SyncItem[]): Promise<number> {
  try {
    return await sendOne(parts, items);
  } catch (cause) {
    if (!(cause instanceof ApiError) || !isAboutTheItems(cause)) throw cause;
    if (items.length === 1) {
      if (cause.kind === 'refused') await park(parts.store, items[0]!, { code: cause.code, message: cause.message });
      return 0;
    }
    const half = Math.ceil(items.length / 2);
    return (await sendHalving(parts, items.slice(0, half))) + (await sendHalving(parts, items.slice(half)));
  }
}

async function sendOne(parts: RoundParts, items: SyncItem[]): Promise<number> {
  const answer = await parts.api.sendBatch({
    protocol: 1,
    device_id: parts.deviceId,
    sent_wall_ms: parts.wallNow(),
    items,
  });
  await noteEpoch(parts.store, answer.server_epoch);
  const settled = await applyVerdicts(parts.store, answer.verdicts);
  await keepEarlyAnalyses(parts.store, answer.analyses);
  return settled.size;
}

/** @returns true when the server's epoch turned out to be new, and sending has to come again */
async function fetchNew(parts: RoundParts): Promise<boolean> {
  let isNewEpoch = false;
  for (;;) {
    const answer = await parts.api.fetchFeed(await feedCursor(parts.store), FEED_PAGE);
    const changed = await applyFeed(parts.store, answer);
    isNewEpoch ||= changed;
    if (!changed && !answer.more && (await feedCursor(parts.store)) === answer.cursor) return isNewEpoch;
  }
}

const isAboutTheItems = (error: ApiError) =>
  error.status === 413 ||
  ((error.status === 400 || error.status === 422) && error.fields.some(({ path }) => path.startsWith('items')));
