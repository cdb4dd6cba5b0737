import { MAX_SYNC_BYTES } from '@shared/schemas/limits';
import type { SyncItem } from '@shared/schemas/sync';

/** Half of what the server reads: the JSON around the texts, and their escaped quotes, need room too. */
const BATCH_BYTES = MAX_SYNC_BYTES / 2;

/** The first items that fit one request; always at least one, if there is one. */
export function fillBatch(items: SyncItem[], most = BATCH_BYTES): SyncItem[] {
  const batch: SyncItem[] = [];
  let bytes = 0;
  for (const item of items) {
    bytes += encoder.encode(JSON.stringify(item)).length;
    if (batch.length > 0 && bytes > most) break;
    batch.push(item);
  }
  return batch;
}

const encoder = new TextEncoder();
