import { onScopeDispose, readonly, ref } from 'vue';

/**
 * Keeps the screen on. Browsers drop it whenever the page is hidden, so ask again on return and on the
 * first tap, which some take more kindly.
 *
 * @param wakeLock  default: the browser's; undefined where it has none
 */
export function useWakeLock(wakeLock: WakeLock | undefined = navigator.wakeLock) {
  const state = ref<'unknown' | 'on' | 'refused' | 'unsupported'>(wakeLock ? 'unknown' : 'unsupported');
  let sentinel: WakeLockSentinel | null = null;
  let isDone = false;

  /** @returns whether the screen stays on */
  async function ask(): Promise<boolean> {
    if (!wakeLock || isDone) return false;
    if (sentinel && !sentinel.released) return true;
    try {
      const given = await wakeLock.request('screen');
      if (isDone) {
        void given.release();
        return false;
      }
      sentinel = given;
      state.value = 'on';
      return true;
    } catch {
      state.value = 'refused';
      return false;
    }
  }

  const onReturn = () => {
    if (document.visibilityState === 'visible') void ask();
  };
  document.addEventListener('visibilitychange', onReturn);
  onScopeDispose(() => {
    isDone = true;
    document.removeEventListener('visibilitychange', onReturn);
    void sentinel?.release();
  });
  return { state: readonly(state), ask };
}
