import { onScopeDispose, readonly, ref } from 'vue';

export const HOLD_MS = 800;
/** How long the second press may follow the first. */
export const SECOND_PRESS_MS = 3_000;

/**
 * Ending something that must not end by accident: hold for 0.8 s; or, for those who cannot hold, press
 * shortly and then press in another place within 3 s; or press a key twice within 3 s. Sliding off the
 * button takes the press back.
 *
 * @param stop  called once it is meant
 */
export function useHoldToStop(stop: () => void) {
  const isHolding = ref(false);
  /** The first of two presses was made. */
  const isAsking = ref(false);
  let holdTimer: ReturnType<typeof setTimeout> | undefined;
  let askTimer: ReturnType<typeof setTimeout> | undefined;

  function calm() {
    clearTimeout(holdTimer);
    isHolding.value = false;
  }

  function ask() {
    clearTimeout(askTimer);
    isAsking.value = true;
    askTimer = setTimeout(takeBack, SECOND_PRESS_MS);
  }

  function takeBack() {
    clearTimeout(askTimer);
    isAsking.value = false;
  }

  function confirm() {
    calm();
    takeBack();
    stop();
  }

  function onPointerDown(event: PointerEvent) {
    if (event.pointerType === 'mouse' && event.button !== 0) return;
    // A finger is captured by what it lands on; let go, or sliding off would not be told.
    (event.target as Element | null)?.releasePointerCapture?.(event.pointerId);
    isHolding.value = true;
    clearTimeout(holdTimer);
    holdTimer = setTimeout(confirm, HOLD_MS);
  }

  /**
   * A short press asks. On click and not on release: the click comes after it, and would land on what
   * asking has brought up. A key, or a screen reader, asks and then confirms in the same place.
   */
  function onClick(event: MouseEvent) {
    const isPointer = event.detail > 0;
    if (isAsking.value && !isPointer) confirm();
    else ask();
  }

  function onKeyDown(event: KeyboardEvent) {
    if (event.repeat) event.preventDefault();
  }

  onScopeDispose(() => {
    calm();
    takeBack();
  });

  return {
    isHolding: readonly(isHolding),
    isAsking: readonly(isAsking),
    confirm,
    takeBack,
    on: {
      pointerdown: onPointerDown,
      pointerup: calm,
      pointerleave: calm,
      pointercancel: calm,
      click: onClick,
      keydown: onKeyDown,
    },
  };
}
