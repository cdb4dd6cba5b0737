import { onScopeDispose, watch, type Ref } from 'vue';
import type { TapInput } from '@shared/schemas/run';
import type { RejectedTap } from '@shared/timing/tapRecording';

/** A contact this wide or high, CSS px, is a palm. From memory: fingertips report 20 to 60, lying palms 100 and more. */
export const PALM_PX = 110;
/** A click this soon after a finger or a key comes from it, and not from a screen reader. */
const ECHO_MS = 1_500;

export interface TapTarget {
  tap: (at_ms: number, input: TapInput) => void;
  reject: (at_ms: number, why: RejectedTap) => void;
  undo: (at_ms: number) => void;
  missed: (at_ms: number) => void;
}

const TAP_KEYS = new Set([' ', 'Enter', 'PageDown']);

/**
 * Turns everything a person may tap with into taps: finger, pen, mouse, keys, clickers, screen readers.
 * Times are the browser's own time of the input (event.timeStamp), which a busy page cannot delay. A
 * second finger counts like the first: a resting thumb makes every real tap a second one.
 */
export function useTapInput(pad: Ref<HTMLElement | null>, target: TapTarget): void {
  let lastOther = -Infinity;

  function onPointerDown(event: PointerEvent) {
    lastOther = event.timeStamp;
    if (event.pointerType === 'mouse' && event.button !== 0) return;
    if (!event.isTrusted) target.reject(event.timeStamp, 'untrusted');
    else if (event.pointerType !== 'mouse' && Math.max(event.width, event.height) >= PALM_PX)
      target.reject(event.timeStamp, 'palm');
    else target.tap(event.timeStamp, inputOf(event.pointerType));
  }

  function onKeyDown(event: KeyboardEvent) {
    if (event.ctrlKey || event.altKey || event.metaKey) return;
    const isTap = TAP_KEYS.has(event.key);
    const letter = event.key.toLowerCase();
    if (!isTap && letter !== 'u' && letter !== 'm') return;
    event.preventDefault();
    lastOther = event.timeStamp;
    if (!isTap) {
      if (event.repeat || !event.isTrusted) return;
      if (letter === 'u') target.undo(event.timeStamp);
      else target.missed(event.timeStamp);
    } else if (!event.isTrusted) target.reject(event.timeStamp, 'untrusted');
    else if (event.repeat) target.reject(event.timeStamp, 'key_repeat');
    else target.tap(event.timeStamp, 'key');
  }

  /** A space bar let go would click the button once more. */
  function onKeyUp(event: KeyboardEvent) {
    if (!TAP_KEYS.has(event.key)) return;
    event.preventDefault();
    lastOther = event.timeStamp;
  }

  /** Screen readers and switches send a click alone. */
  function onClick(event: MouseEvent) {
    if (event.timeStamp - lastOther < ECHO_MS) return;
    if (event.isTrusted) target.tap(event.timeStamp, 'assistive');
    else target.reject(event.timeStamp, 'untrusted');
  }

  const onMenu = (event: Event) => event.preventDefault();

  function listen(element: HTMLElement) {
    element.addEventListener('pointerdown', onPointerDown, { passive: true });
    element.addEventListener('keydown', onKeyDown);
    element.addEventListener('keyup', onKeyUp);
    element.addEventListener('click', onClick);
    element.addEventListener('contextmenu', onMenu);
  }
  function stopListening(element: HTMLElement) {
    element.removeEventListener('pointerdown', onPointerDown);
    element.removeEventListener('keydown', onKeyDown);
    element.removeEventListener('keyup', onKeyUp);
    element.removeEventListener('click', onClick);
    element.removeEventListener('contextmenu', onMenu);
  }

  const stop = watch(
    pad,
    (element, before) => {
      if (before) stopListening(before);
      if (element) listen(element);
    },
    { immediate: true, flush: 'sync' },
  );
  onScopeDispose(() => {
    stop();
    if (pad.value) stopListening(pad.value);
  });
}

function inputOf(pointerType: string): TapInput {
  return pointerType === 'pen' || pointerType === 'mouse' ? pointerType : 'touch';
}
