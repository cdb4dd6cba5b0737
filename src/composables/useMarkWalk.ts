import { computed, ref, watch, type Ref } from 'vue';

/**
 * Walking along the marks of a strip one at a time: arrow keys, Home and End, or the one nearest to a
 * swing. `at` is null until the walk begins or while nothing is highlighted from outside.
 */
export function useMarkWalk<Point extends { mark: number; swing: number }>(
  points: Ref<Point[]>,
  highlight: Ref<number | null | undefined>,
) {
  const at = ref<number | null>(null);
  const point = computed(() => (at.value === null ? null : (points.value[at.value] ?? null)));
  const last = () => points.value.length - 1;

  watch(
    highlight,
    (mark) => {
      if (mark === undefined) return;
      const found = points.value.findIndex((candidate) => candidate.mark === mark);
      at.value = found === -1 ? null : found;
    },
    { immediate: true },
  );

  function go(to: number) {
    if (last() >= 0) at.value = Math.min(Math.max(to, 0), last());
  }

  function onKey(event: KeyboardEvent) {
    const from = at.value ?? -1;
    const steps: Record<string, number> = {
      ArrowRight: from + 1,
      ArrowUp: from + 1,
      ArrowLeft: from - 1,
      ArrowDown: from - 1,
      Home: 0,
      End: last(),
    };
    const to = steps[event.key];
    if (to === undefined) return;
    event.preventDefault();
    go(to);
  }

  /** To the first of the points whose place is nearest to `x`. */
  function toNearest(x: number, place: (point: Point) => number) {
    const away = points.value.map((candidate) => Math.abs(place(candidate) - x));
    go(Math.max(away.indexOf(Math.min(...away)), 0));
  }
  const toSwing = (swing: number) => toNearest(swing, (candidate) => candidate.swing);

  return { at, point, onKey, toNearest, toSwing };
}
