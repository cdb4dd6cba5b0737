import { readonly, ref } from 'vue';
import { isRecording } from '@/sync/recordingLock';

/** What vite-plugin-pwa's `registerSW` takes and gives, as far as it is used here. */
type Register = (options: {
  immediate: boolean;
  onNeedRefresh: () => void;
  onNeedReload: () => void;
  onRegisteredSW: (url: string, registration: ServiceWorkerRegistration | undefined) => void;
}) => (reload?: boolean) => Promise<void>;

/**
 * waiting: a new version is here. replaced: it took over, and this page still runs the one before.
 * missing: a part of the app could not be fetched, for want of a network or because of an update.
 */
const standing = ref<'current' | 'waiting' | 'replaced' | 'missing'>('current');
let takeOver: (() => Promise<void>) | null = null;
let wasAcceptedHere = false;

const LOOK_AGAIN_MS = 30 * 60_000;

/**
 * Registers the service worker in this tab. No tab ever reloads by itself: `onNeedReload` stands in the
 * place of the reload the registration would do in every tab when one of them accepts.
 */
export function beginAppUpdate(register: Register, reload = () => location.reload()): void {
  takeOver = register({
    immediate: true,
    onNeedRefresh: () => {
      standing.value = 'waiting';
    },
    onNeedReload: () => {
      if (wasAcceptedHere) reload();
      else standing.value = 'replaced';
    },
    onRegisteredSW: (_url, registration) => {
      if (registration) setInterval(() => void registration.update().catch(() => undefined), LOOK_AGAIN_MS);
    },
  });
}

/** Nothing reloads by itself: the line says so, and the person chooses when to load again. */
export function notePartMissing(): void {
  if (standing.value === 'current') standing.value = 'missing';
}

/** For the one quiet line about a new version, on pages where nothing is being timed. */
export function useAppUpdate(reload = () => location.reload()) {
  /** @returns false, and changes nothing, while a tab of this browser times a run */
  async function accept(): Promise<boolean> {
    if (await isRecording()) return false;
    if (standing.value === 'waiting') {
      wasAcceptedHere = true;
      await takeOver?.();
    } else reload();
    return true;
  }
  return { standing: readonly(standing), accept };
}
