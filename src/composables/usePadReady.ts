import { v7 as uuidv7 } from 'uuid';
import { onScopeDispose, shallowRef } from 'vue';
import { openRecordings } from '@/db/recordings';
import { useSession } from '@/stores/useSession';
import { isRecording } from '@/sync/recordingLock';
import { clockStep } from './clockStep';
import { useCutShort } from './useCutShort';
import { useMaker } from './useMaker';
import type { RecorderOptions } from './useRecorder';
import { useRecordingLock } from './useRecordingLock';
import { useRunPlan } from './useRunPlan';
import { useSetUpWords } from './useSetUpWords';
import { useStorageState } from './useStorageState';
import { useWhen } from './useWhen';

export type PadReadiness = 'loading' | 'no_storage' | 'not_saving' | 'elsewhere' | 'cut_short' | 'ready';

/**
 * Everything that must be known before the first tap, so that nothing is left to do after it: the store
 * is open and takes writes, no other tab records, nothing cut short waits, the clock's step is known.
 *
 * @param isBusy  whether a run is going on this page
 */
export function usePadReady(isBusy: () => boolean) {
  const when = useWhen();
  const session = useSession();
  const plan = useRunPlan();
  const { maker, place } = useMaker();
  const { state: storage, look: lookAtStorage } = useStorageState();
  const { cutShort, look: lookForCutShort } = useCutShort();
  const lock = useRecordingLock();
  const inWords = useSetUpWords();

  const state = shallowRef<PadReadiness>('loading');
  const recorder = shallowRef<Omit<RecorderOptions, 'gloved'> | null>(null);
  const setUp = shallowRef('');
  const since = shallowRef('');
  let isAnyway = false;

  async function getReady(): Promise<void> {
    state.value = 'loading';
    await session.ready;
    const { store } = session;
    if (!store) return void (state.value = 'no_storage');
    if (await isRecording()) return standBack();
    if (!(await lookAtStorage(store)).isSaving && !isAnyway) return void (state.value = 'not_saving');
    await Promise.all([lookForCutShort().catch(() => undefined), plan.load().catch(() => undefined)]);
    if (cutShort.value.length > 0 && !isAnyway) return void (state.value = 'cut_short');
    if (!(await lock.acquire())) return standBack();
    const chosen = plan.current();
    setUp.value = inWords(chosen);
    recorder.value = {
      store,
      id: uuidv7(),
      plan: chosen,
      place: place(),
      maker: await maker(),
      clock: { step_us: clockStep(), isolated: window.crossOriginIsolated },
    };
    state.value = 'ready';
  }

  /** Another tab records: tell since when, if the run is this account's. */
  async function standBack(): Promise<void> {
    const [open] = session.store ? await openRecordings(session.store).catch(() => []) : [];
    since.value = open ? when(open.started_wall_ms) : '';
    state.value = 'elsewhere';
  }

  function timeAnyway(): Promise<void> {
    isAnyway = true;
    return getReady();
  }

  /** An armed pad nobody looks at keeps no other tab from recording. */
  async function onVisibility(): Promise<void> {
    if (state.value !== 'ready' || isBusy()) return;
    if (document.visibilityState === 'hidden') lock.letGo();
    else if (!(await lock.acquire())) await standBack();
  }
  const listener = () => void onVisibility();
  document.addEventListener('visibilitychange', listener);
  onScopeDispose(() => document.removeEventListener('visibilitychange', listener));

  return { state, recorder, storage, setUp, since, getReady, timeAnyway };
}
