import { computed, onScopeDispose, ref, type Ref } from 'vue';

/**
 * Type sizes of the Board are given for 1080 lines. This is the factor for the window at hand: by its
 * height, unless it is so narrow that its width says more.
 */
export function useBoardScale(textScale: Ref<number>, browser: Window = window) {
  const size = ref({ width: browser.innerWidth, height: browser.innerHeight });
  const measure = () => {
    size.value = { width: browser.innerWidth, height: browser.innerHeight };
  };
  browser.addEventListener('resize', measure);
  onScopeDispose(() => browser.removeEventListener('resize', measure));
  return computed(() => boardScale(size.value.width, size.value.height) * textScale.value);
}

/** Below this many CSS pixels of width the Board is read in the hand, not from the back of a room. */
const NARROW_PX = 900;
/** Keeps the smallest type, 26 px at 1080 lines, at 13 px on a phone. */
const LEAST = 0.5;

export function boardScale(width: number, height: number): number {
  return Math.max(LEAST, Math.min(height / 1080, width / NARROW_PX));
}
