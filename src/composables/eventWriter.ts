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
  let isMending = false;

  const arrived = (seq: number) => {
    missing.delete(seq);
    isFailing.value = missing.size > 0;
  };

  function write(event: TapEvent): void {
    const written = writeEvent(store, recording, event);
    withDeadline(written, WRITE_DEADLINE_MS).then(
      () => (missing.size > 0 ? mend() : undefined),
      () => {
        missing.add(event.seq);
        isFailing.value = true;
        // Late is still here.
        written.then(() => arrived(event.seq)).catch(() => undefined);
      },
    );
  }

  async function mend(): Promise<void> {
    if (isMending) return;
    isMending = true;
    const tried = [...missing];
    try {
      await compare();
      tried.forEach(arrived);
    } catch {
      // The next write that works tries again.
    } finally {
      isMending = false;
    }
  }

  /** Brings the disk up to what memory holds; tells how many rows it lacked. */
  async function compare(): Promise<number> {
    if (!store.isOpen()) await withDeadline(store.open(), WRITE_DEADLINE_MS);
    return withDeadline(rewriteMissing(store, recording));
  }

  return { write, compare, isFailing };
}
