import { onScopeDispose, readonly, ref } from 'vue';
import { RECORDING_LOCK } from '@/sync/recordingLock';

/**
 * One recorder among all tabs of this browser. Where the browser has no locks (plain http), this tab is
 * taken to be alone.
 *
 * @param locks  default: the browser's
 */
export function useRecordingLock(locks: LockManager | undefined = navigator.locks) {
  /** here: this tab may record. elsewhere: another tab does. */
  const holder = ref<'asking' | 'here' | 'elsewhere'>('asking');
  let release: (() => void) | undefined;

  function acquire(): Promise<boolean> {
    if (release || !locks) {
      holder.value = 'here';
      return Promise.resolve(true);
    }
    return new Promise((answer) => {
      void locks.request(RECORDING_LOCK, { ifAvailable: true }, (lock) => {
        holder.value = lock ? 'here' : 'elsewhere';
        answer(lock !== null);
        if (!lock) return undefined;
        return new Promise<void>((done) => {
          release = done;
        });
      });
    });
  }

  function letGo(): void {
    release?.();
    release = undefined;
    holder.value = 'asking';
  }

  onScopeDispose(letGo);
  return { holder: readonly(holder), acquire, letGo };
}
