import { onScopeDispose } from 'vue';

/** Asks before the page is closed or reloaded while `isBusy`. Browsers show their own words. */
export function useLeaveGuard(isBusy: () => boolean): void {
  const onBeforeUnload = (event: BeforeUnloadEvent) => {
    if (isBusy()) event.preventDefault();
  };
  window.addEventListener('beforeunload', onBeforeUnload);
  onScopeDispose(() => window.removeEventListener('beforeunload', onBeforeUnload));
}
