import { onScopeDispose, shallowRef, watch } from 'vue';
import { bringBackRecording, discardRecording, openRecordings, sealRecording } from '@/db/recordings';
import { useSession } from '@/stores/useSession';
import { isRecording } from '@/sync/recordingLock';
import { foldTaps } from '@shared/timing/foldTaps';
import { sealTapRun } from '@shared/timing/sealTapRun';
import type { TapRecording } from '@shared/timing/tapRecording';
import { useMaker } from './useMaker';

/**
 * Runs of this account that ended with the page: a crash, a closed tab, an empty battery. They are
 * offered, never gone on with: the page's clock started anew. While any tab times a run there are none.
 */
export function useCutShort() {
  const session = useSession();
  const { maker, place } = useMaker();
  const cutShort = shallowRef<TapRecording[]>([]);
  /** The one discarded last, to bring back. */
  const discarded = shallowRef<TapRecording | null>(null);
  let isGone = false;
  onScopeDispose(() => (isGone = true));

  async function look(): Promise<void> {
    await session.ready;
    const { store } = session;
    if (!store || isGone || (await isRecording())) return;
    try {
      const open = await openRecordings(store);
      const [kept, empty] = [open.filter(hasMark), open.filter((recording) => !hasMark(recording))];
      await Promise.all(empty.map(({ id }) => discardRecording(store, id)));
      if (store === session.store) cutShort.value = kept;
    } catch (cause) {
      // A change of account closes the store that is being read; the next one is looked into as it opens.
      if (store.isOpen()) throw cause;
    }
  }

  /** @returns the id of the run it became */
  async function keep(recording: TapRecording): Promise<string> {
    const run = sealTapRun(recording, 'cut_short', await maker());
    if (!run || !session.store) throw new Error('a recording without a mark in force makes no run');
    await sealRecording(session.store, run, place());
    drop(recording);
    return run.id;
  }

  async function discard(recording: TapRecording): Promise<void> {
    await discardRecording(session.store!, recording.id);
    discarded.value = recording;
    drop(recording);
  }

  async function bringBack(): Promise<void> {
    if (!discarded.value) return;
    await bringBackRecording(session.store!, discarded.value.id);
    discarded.value = null;
    await look();
  }

  function drop({ id }: TapRecording) {
    cutShort.value = cutShort.value.filter((recording) => recording.id !== id);
  }

  watch(
    () => session.store,
    () => {
      cutShort.value = [];
      discarded.value = null;
      return look();
    },
    { immediate: true },
  );
  return { cutShort, discarded, keep, discard, bringBack, look };
}

function hasMark(recording: TapRecording): boolean {
  return foldTaps(recording.events).marks.length > 0;
}
