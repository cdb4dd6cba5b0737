import 'fake-indexeddb/auto';
import { afterEach, expect, it } from 'vitest';
import { defineComponent, h } from 'vue';
import RepeatsBlock from '@/components/bench/RepeatsBlock.vue';
import { useRuns } from '@/stores/useRuns';
import { useSession } from '@/stores/useSession';
import { useSettings } from '@/stores/useSettings';
import { keyed, metreRig, tapped, tenDegrees } from '../../factories/captures';
import { mountApp } from '../support/mountApp';
import { plugIn } from '../support/network';
import { rawRun } from '../support/samples';
import { eventually } from '../../support/eventually';

plugIn(() => Promise.reject(new TypeError('no network')));
let close: () => void = () => undefined;
afterEach(() => close());

it('three runs of a rig have a mean stated as chosen; one set aside and one in doubt stay out and are told', async () => {
  const Page = defineComponent(() => () => h(RepeatsBlock, { entries: useRuns().entries }));
  const { wrapper } = mountApp(Page);
  close = () => wrapper.unmount();
  await useSession().ready;
  await useSettings().ready;
  const add = (parts: Parameters<typeof rawRun>[0]) =>
    useRuns().addRun(rawRun({ rig: metreRig, amplitudes: tenDegrees, ...parts }));
  const { mark_us } = tapped();
  await add({ capture: tapped() });
  await add({ capture: tapped() });
  await add({ capture: tapped({ mark_us: mark_us.map((us) => Math.round(us * 1.05)) }) });
  await eventually(() => expect(wrapper.find('tbody td').text()).toBe('3'));
  expect(wrapper.text()).toMatch(/They scatter [\d.]+ times as widely/);
  expect(wrapper.text()).toContain('after the GUM');
  const odd = useRuns().entries.find(({ raw }) => raw.capture.kind === 'tap' && raw.capture.mark_us[1]! > mark_us[1]!)!;
  await useRuns().addEdit(odd.row.id, { kind: 'set_aside' }, 'somebody leaned on the table');
  await add({ capture: keyed({ total_us: 38_150_000 }) });
  await eventually(() => expect(wrapper.find('tbody td').text()).toBe('2'));
  expect(wrapper.text()).toContain('They agree');
  expect(wrapper.text()).toContain('One run that is set aside is left out.');
  expect(wrapper.text()).toContain('One run whose count is in doubt is left out');
  useSettings().repeatProfile = 'half_range';
  await eventually(() => expect(wrapper.text()).toContain('half of largest minus smallest'));
});
