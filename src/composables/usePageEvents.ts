import { onScopeDispose } from 'vue';
import type { RunEvent } from '@shared/schemas/run';

/** Tells what happens to the page while timing: hidden, frozen, turned. `at_ms` is the event's own time. */
export function usePageEvents(tell: (at_ms: number, what: RunEvent['kind']) => void): void {
  const onVisibility = (event: Event) =>
    tell(event.timeStamp, document.visibilityState === 'hidden' ? 'hidden' : 'shown');
  const onHide = (event: Event) => tell(event.timeStamp, 'page_hidden');
  const onFreeze = (event: Event) => tell(event.timeStamp, 'frozen');
  const onResume = (event: Event) => tell(event.timeStamp, 'resumed');
  const onRotate = (event: Event) => tell(event.timeStamp, 'rotated');
  const turned = window.matchMedia('(orientation: portrait)');

  document.addEventListener('visibilitychange', onVisibility);
  document.addEventListener('freeze', onFreeze);
  document.addEventListener('resume', onResume);
  window.addEventListener('pagehide', onHide);
  turned.addEventListener('change', onRotate);
  onScopeDispose(() => {
    document.removeEventListener('visibilitychange', onVisibility);
    document.removeEventListener('freeze', onFreeze);
    document.removeEventListener('resume', onResume);
    window.removeEventListener('pagehide', onHide);
    turned.removeEventListener('change', onRotate);
  });
}
