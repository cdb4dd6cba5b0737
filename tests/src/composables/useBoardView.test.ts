import { afterEach, expect, it, vi } from 'vitest';
import { nextTick, ref } from 'vue';
import type { BoardPoint } from '@shared/schemas/accounts';
import { useBoardView } from '@/composables/useBoardView';

const point = (n: number): BoardPoint => ({
  run_id: `018f0000-0000-7000-8000-00000000000${n}`,
  bench: n,
  small_period_s: { value: 2, u: 0.01, expanded_u: 2 * 0.01 },
  length_m: 1,
  open_flags: 0,
});
const picture = (...benches: number[]) => ({ points: benches.map(point), wall_ms: benches.length });

afterEach(() => vi.useRealTimers());

it('the first picture shows at once and a burst after it as one', async () => {
  vi.useFakeTimers();
  const latest = ref(picture());
  const { shown } = useBoardView(latest, ref(false));
  latest.value = picture(1);
  await nextTick();
  expect(shown.value.points).toHaveLength(1);
  latest.value = picture(1, 2);
  await nextTick();
  latest.value = picture(1, 2, 3);
  await nextTick();
  expect(shown.value.points).toHaveLength(1);
  vi.advanceTimersByTime(250);
  expect(shown.value.points).toHaveLength(3);
});

it('a frozen picture keeps its points and its time, and counts what came since', async () => {
  vi.useFakeTimers();
  const latest = ref(picture(1));
  const isFrozen = ref(true);
  const { shown, held } = useBoardView(latest, isFrozen);
  latest.value = picture(1, 2, 3);
  await nextTick();
  vi.advanceTimersByTime(1000);
  expect([shown.value.points.length, shown.value.wall_ms, held.value]).toEqual([1, 1, 2]);
  isFrozen.value = false;
  await nextTick();
  vi.advanceTimersByTime(250);
  expect([shown.value.points.length, held.value]).toEqual([3, 0]);
});
