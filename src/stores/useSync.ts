import { defineStore } from 'pinia';
import { computed, shallowRef, watch } from 'vue';
import type { ApiError } from '@/api/ApiError';
import { fetchFeed, sendBatch } from '@/api/sync';
import { deviceId } from '@/db/appStore';
import { ownerKey, type LocalStore } from '@/db/localStore';
import { readMeta } from '@/db/meta';
import { sendOnceMore, watchOutbox } from '@/db/outbox';
import { syncRound, type RoundOutcome } from '@/sync/round';
import { createSchedule, type Schedule } from '@/sync/schedule';
import { browserLocks } from '@/sync/uploadLock';
import { useSession } from './useSession';

/**
 * guest: no account to send to. starting: what waits was not counted yet. quiet: all was received. not_taken:
 * nothing waits, but something was refused. The rest say what keeps the waiting ones.
 */
export type SyncState =
  | 'guest'
  | 'starting'
  | 'quiet'
  | 'not_taken'
  | 'waiting'
  | 'sending'
  | 'unreachable'
  | 'signed_out'
  | 'storage_failed';

const DESK_IDLE_MS = 4_000;
const FIELD_IDLE_MS = 30_000;

/** Sends what waits and fetches what is new, by itself, and says in words how that stands. */
export const useSync = defineStore('sync', () => {
  const session = useSession();
  const waiting = shallowRef(0);
  /** Runs and edits the server will not have; they stay here. */
  const refused = shallowRef(0);
  const isCounted = shallowRef(false);
  const isSending = shallowRef(false);
  const trouble = shallowRef<'unreachable' | 'storage_failed' | null>(null);
  const lastError = shallowRef<ApiError | null>(null);
  const lastContact_wall_ms = shallowRef<number | null>(null);
  let schedule: Schedule | null = null;

  const state = computed<SyncState>(() => {
    if (!session.me) return 'guest';
    if (isSending.value) return 'sending';
    if (session.standing === 'expired') return 'signed_out';
    if (trouble.value) return trouble.value;
    if (!isCounted.value) return 'starting';
    if (waiting.value > 0) return 'waiting';
    return refused.value > 0 ? 'not_taken' : 'quiet';
  });

  /** The server answered, about whatever it was. */
  function noteContact(): void {
    lastContact_wall_ms.value = Date.now();
  }

  function heed(outcome: RoundOutcome): void {
    isSending.value = false;
    trouble.value = null;
    lastError.value = null;
    if (outcome.kind === 'signed_out') session.noteExpired();
    else if (outcome.kind === 'storage_failed') trouble.value = 'storage_failed';
    else if (outcome.kind === 'cannot_reach') {
      trouble.value = 'unreachable';
      lastError.value = outcome.error;
    } else if (outcome.kind !== 'not_owner') noteContact();
  }

  function follow(store: LocalStore): () => void {
    const device = deviceId();
    const mine = createSchedule({
      round: async () =>
        syncRound({
          store,
          deviceId: await device,
          api: { sendBatch, fetchFeed },
          wallNow: Date.now,
          isOwner: () => session.isOwner(store.owner),
          onSending: () => (isSending.value = true),
        }),
      onOutcome: heed,
      locks: browserLocks(),
      setTimer: (work, ms) => setTimeout(work, ms),
      clearTimer: (timer) => clearTimeout(timer),
      random: Math.random,
      idle_ms: () => (document.hidden ? null : session.isStaff ? DESK_IDLE_MS : FIELD_IDLE_MS),
    });
    schedule = mine;
    void readMeta<number>(store, 'last_contact_wall_ms').then(
      (at) => (lastContact_wall_ms.value ??= at ?? null),
      // The store was closed by a change of account, or gives no answer: the schedule says which.
      () => undefined,
    );
    const watching = watchOutbox(store).subscribe((now) => {
      const isMore = now.waiting > waiting.value;
      waiting.value = now.waiting;
      refused.value = now.refused;
      isCounted.value = true;
      if (isMore) mine.wake();
    });
    mine.wake();
    return () => {
      watching.unsubscribe();
      mine.stop();
      waiting.value = 0;
      refused.value = 0;
      isCounted.value = false;
      isSending.value = false;
      trouble.value = null;
      lastContact_wall_ms.value = null;
    };
  }

  watch(
    () => session.store,
    (store, _before, onCleanup) => {
      schedule = null;
      if (store && store.owner !== ownerKey(null)) onCleanup(follow(store));
    },
    { immediate: true, flush: 'sync' },
  );
  watch(
    () => session.standing,
    (standing) => standing !== 'expired' && schedule?.wake(),
  );

  /** Tries now: the person asked, or the network or the page came back. */
  function sendNow(): void {
    if (schedule) schedule.wake();
    else void session.askTheServer();
  }
  window.addEventListener('online', sendNow);
  document.addEventListener('visibilitychange', () => document.hidden || sendNow());

  /** Puts one refused item back in the queue. */
  async function tryAgain(type: 'run' | 'edit', id: string): Promise<void> {
    if (session.store) await sendOnceMore(session.store, type, id);
  }

  return { state, waiting, refused, lastContact_wall_ms, lastError, noteContact, sendNow, tryAgain };
});
