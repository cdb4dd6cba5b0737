import { expect, it, vi } from 'vitest';
import { defineComponent, h, nextTick, shallowRef } from 'vue';
import { usePadWords } from '@/composables/usePadWords';
import type { PadView } from '@/composables/useRecorder';
import { mountApp } from '../support/mountApp';

const view = (count: number): PadView => ({
  phase: 'running',
  count,
  swingsLeft: null,
  steadiness: undefined,
  canUndo: true,
  canMiss: true,
  rewritten: 0,
});

it('a contact that did not count is said beside the tap just shown, and gives way to the next one that counts', async () => {
  const frames: (() => void)[] = [];
  vi.stubGlobal('requestAnimationFrame', (work: () => void) => frames.push(work));
  const seen = shallowRef(view(3));
  let words!: ReturnType<typeof usePadWords>;
  const plan = { swings_per_mark: 1, planned_swings: null, rig: null, amplitudes: [] };
  const { wrapper } = mountApp(
    defineComponent(() => {
      words = usePadWords(seen, plan);
      return () => h('p');
    }),
  );
  words.notCounted('bounce');
  seen.value = view(4);
  await nextTick();
  frames.splice(0).forEach((work) => work());
  expect(words.lastDone.value).toBe('Too soon after the last tap: not counted');
  expect(words.heard.value).toBe(words.lastDone.value);
  expect(words.said.value).toBe(4);
  seen.value = view(5);
  await nextTick();
  expect(words.lastDone.value).toBe('');
  wrapper.unmount();
  vi.unstubAllGlobals();
});
