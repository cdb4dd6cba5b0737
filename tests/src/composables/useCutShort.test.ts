import 'fake-indexeddb/auto';
import { afterEach, expect, it } from 'vitest';
import { defineComponent } from 'vue';
import { v4 as uuidv4 } from 'uuid';
import { mountApp } from '../support/mountApp';
import { json, plugIn } from '../support/network';
import { useCutShort } from '@/composables/useCutShort';
import { closeStore } from '@/db/localStore';
import { writeEvent } from '@/db/recordings';
import { useSession } from '@/stores/useSession';
import type { TapRecording } from '@shared/timing/tapRecording';

plugIn(() => json({ me: null }));
let close: () => void = () => undefined;
afterEach(() => close());

async function offer() {
  let offered: ReturnType<typeof useCutShort>;
  const { wrapper } = mountApp(defineComponent(() => ((offered = useCutShort()), () => null)));
  close = () => wrapper.unmount();
  await useSession().ready;
  return { offered: offered!, store: useSession().store! };
}
const recording = (): TapRecording => ({
  id: uuidv4(),
  plan: { swings_per_mark: 1, planned_swings: null, rig: null, amplitudes: [] },
  started_wall_ms: 1,
  zone_offset_min: 0,
  clock_step_us: 100,
  isolated: false,
  events: [],
});

it('a run that ended with its page is offered, one without a mark is let go', async () => {
  const { offered, store } = await offer();
  const [marked, empty] = [recording(), recording()];
  await writeEvent(store, marked, { seq: 1, at_ms: 5, wall_ms: 6, kind: 'mark', input: 'touch' });
  await writeEvent(store, empty, { seq: 1, at_ms: 5, wall_ms: 6, kind: 'event', what: 'hidden' });
  await offered.look();
  expect(offered.cutShort.value.map(({ id }) => id)).toEqual([marked.id]);
});

it('a store closed by a change of account while it is looked into is no trouble', async () => {
  const { offered, store } = await offer();
  const looking = offered.look();
  closeStore(store);
  await expect(looking).resolves.toBeUndefined();
});
