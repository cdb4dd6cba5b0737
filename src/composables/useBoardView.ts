import { computed, shallowRef, watch, type Ref } from 'vue';
import type { BoardPoint } from '@shared/schemas/accounts';

const GATHER_MS = 250;

interface Picture {
  points: BoardPoint[];
  /** The server's clock when this was so. */
  wall_ms: number;
}

/** What a Board shows: the points as they come, gathered so that a burst is one redraw; frozen, those of that moment. */
export function useBoardView(latest: Ref<Picture>, isFrozen: Readonly<Ref<boolean>>) {
  const shown = shallowRef<Picture>(latest.value);
  watch([latest, isFrozen], ([now, frozen], _before, onCleanup) => {
    if (frozen) return;
    if (shown.value.points.length === 0) {
      shown.value = now;
      return;
    }
    const timer = setTimeout(() => (shown.value = now), GATHER_MS);
    onCleanup(() => clearTimeout(timer));
  });
  /** Runs that came since the picture was frozen. */
  const held = computed(() => {
    if (!isFrozen.value) return 0;
    const known = new Set(shown.value.points.map((point) => point.run_id));
    return latest.value.points.filter((point) => !known.has(point.run_id)).length;
  });
  return { shown, held };
}
