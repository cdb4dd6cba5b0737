import { shallowRef } from 'vue';
import { withDeadline } from '@/db/deadline';
import type { LocalStore } from '@/db/localStore';
import { rewriteMissing, writeEvent } from '@/db/recordings';
import type { TapEvent, TapRecording } from '@shared/timing/tapRecording';

/** A write that has not come back by then counts as not saved. */
export const WRITE_DEADLINE_MS = 2_000;

/**
 * Writes a recording's events as they happen and knows whether they arrive. A write that fails or stays
 * silent never stops the run: what is missing is written again with the next one that works.
 */
export function eventWriter(store: LocalStore, recording: TapRecording) {
  const isFailing = shallowRef(false);
  const missing = new Set<number>();
  /** Up to this one the disk was compared with memory and lacks nothing. */
  let complete = 0;
  let isMending = false;

  function write(event: TapEvent): void {
    const written = writeEvent(store, recording, event);
    const isHere = () => arrived(event.seq);
    withDeadline(written, WRITE_DEADLINE_MS).then(
      () => (missing.size > 0 ? mend() : undefined),
      () => {
        if (event.seq <= complete) return;
        missing.add(event.seq);
        isFailing.value = true;
        // Late is still here.
        written.then(isHere, () => undefined);
      },
    );
  }

  function arrived(upTo: number, from = upTo): void {
    for (const seq of missing) if (seq >= from && seq <= upTo) missing.delete(seq);
    isFailing.value = missing.size > 0;
  }

  async function mend(): Promise<void> {
    if (isMending) return;
    isMending = true;
    // What fails here is tried again with the next write that works.
    await compare().catch(() => undefined);
    isMending = false;
  }

  /** Brings the disk up to what memory holds; tells how many rows it lacked. */
  async function compare(): Promise<number> {
    if (!store.isOpen()) await withDeadline(store.open(), WRITE_DEADLINE_MS);
    const held = recording.events.length;
    const lacked = await withDeadline(rewriteMissing(store, recording));
    complete = Math.max(complete, held);
    arrived(held, 1);
    return lacked;
  }

  return { write, compare, isFailing };
}
