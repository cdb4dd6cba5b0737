import 'fake-indexeddb/auto';
import { flushPromises, type VueWrapper } from '@vue/test-utils';
import { afterEach, expect, it } from 'vitest';
import { FREE_PLAN, useRunPlan } from '@/composables/useRunPlan';
import RigPage from '@/pages/RigPage.vue';
import { useSession } from '@/stores/useSession';
import { metreRig, tenDegrees } from '../../factories/captures';
import { eventually } from '../../support/eventually';
import { mountPage } from '../support/mountApp';
import { json, plugIn } from '../support/network';

const PLAN: typeof FREE_PLAN = { swings_per_mark: 1, planned_swings: 30, rig: metreRig, amplitudes: [tenDegrees[0]!] };

let wrapper: VueWrapper;
afterEach(() => wrapper.unmount());

/** The page, opened while a plan is in force. */
async function open(plan = PLAN) {
  plugIn(() => json({ me: null }));
  const before = await mountPage({ render: () => null }, '/settings');
  await useSession().ready;
  await useRunPlan().keep(plan);
  before.wrapper.unmount();
  const page = await mountPage(RigPage, '/bench/rig');
  wrapper = page.wrapper;
  await eventually(() => expect(wrapper.text()).toContain('Plan of the run'));
  const inForce = async () => {
    const kept = useRunPlan();
    await kept.load();
    return kept.current();
  };
  const field = (label: string) => {
    const found = wrapper.findAll('label').find((candidate) => candidate.text() === label);
    if (!found) throw new Error(`no field is labelled ${label}`);
    return wrapper.find<HTMLInputElement>(`[id="${found.attributes('for')}"]`);
  };
  const press = async (name: string) => {
    await wrapper
      .findAll('button, a')
      .find((button) => button.text() === name)!
      .trigger('click');
    await flushPromises();
  };
  return { ...page, inForce, field, press };
}

it('begins with the rig in force', async () => {
  const { field } = await open();
  expect(field('Pivot to bob, reading 1').element.value).toBe('99.9');
  expect(field('At the start').element.value).toBe('10');
  expect(field('Swings in the run').element.value).toBe('30');
  expect(wrapper.text()).toContain('This is what is set up now');
});

it('“Time now” leaves the plan as it is, whatever was typed', async () => {
  const { field, press, inForce, router } = await open();
  await field('Swings in the run').setValue('5');
  await press('Time now');
  await eventually(() => expect(router.currentRoute.value.name).toBe('pad'));
  expect(await inForce()).toEqual(PLAN);
});

it('an empty form is one press away, and still changes nothing by itself', async () => {
  const { field, press, inForce } = await open();
  await press('Begin with an empty form');
  expect(wrapper.findAll('label').map((label) => label.text())).not.toContain('Pivot to bob, reading 1');
  expect(field('At the start').element.value).toBe('');
  expect(field('Swings in the run').element.value).toBe('20');
  expect(await inForce()).toEqual(PLAN);
});

it('a sideways distance longer than the string holds up the pad, stays as typed and has the focus', async () => {
  const { field, press, inForce, router } = await open({ ...FREE_PLAN, rig: metreRig });
  await wrapper.find('input[value="sideways"]').setValue();
  await field('At the start').setValue('120');
  await press('Go to the pad');
  await eventually(() => expect(document.activeElement).toBe(field('At the start').element));
  expect(field('At the start').element.value).toBe('120');
  expect(wrapper.text()).toContain('The sideways distance is not shorter than the length it hangs at.');
  expect(wrapper.text()).toContain('1 field needs another look');
  expect(router.currentRoute.value.name).toBe('rig');
  expect((await inForce()).amplitudes).toEqual([]);
});

it('a problem under the small print is opened and has the focus', async () => {
  const { field, press } = await open();
  await field('Mass of the string').setValue('0,3 g');
  await press('Go to the pad');
  await eventually(() => expect(document.activeElement).toBe(field('Mass of the string').element));
  expect(field('Mass of the string').element.closest('details')!.open).toBe(true);
  expect(wrapper.text()).toContain('“0,3 g” has a unit in it.');
});
