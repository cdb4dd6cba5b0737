import { expect, it } from 'vitest';
import { nextTick, ref } from 'vue';
import { useMarkWalk } from '@/composables/useMarkWalk';

const points = () => ref([0, 1, 2, 3].map((n) => ({ mark: n + 10, swing: n })));
const key = (name: string) => new KeyboardEvent('keydown', { key: name, cancelable: true });

it('arrow keys walk from the first mark to the last and stop there', () => {
  const walk = useMarkWalk(points(), ref(undefined));
  const seen = ['ArrowRight', 'ArrowRight', 'ArrowRight', 'ArrowRight', 'ArrowRight'].map((name) => {
    walk.onKey(key(name));
    return walk.at.value;
  });
  expect(seen).toEqual([0, 1, 2, 3, 3]);
  walk.onKey(key('Home'));
  expect(walk.point.value?.mark).toBe(10);
});

it('an arrow key walks and does not scroll the page; other keys are left to it', () => {
  const walk = useMarkWalk(points(), ref(undefined));
  const [tab, arrow] = [key('Tab'), key('ArrowRight')];
  walk.onKey(tab);
  expect([tab.defaultPrevented, walk.at.value]).toEqual([false, null]);
  walk.onKey(arrow);
  expect(arrow.defaultPrevented).toBe(true);
});

it('a tap picks the mark nearest to it', () => {
  const walk = useMarkWalk(points(), ref(undefined));
  walk.toSwing(2.4);
  expect(walk.at.value).toBe(2);
});

it('a mark highlighted from outside is walked to', async () => {
  const highlight = ref<number | null>(null);
  const walk = useMarkWalk(points(), highlight);
  highlight.value = 13;
  await nextTick();
  expect(walk.at.value).toBe(3);
});
