import 'fake-indexeddb/auto';
import type { VueWrapper } from '@vue/test-utils';
import { afterEach, beforeEach, expect, it } from 'vitest';
import { useRunPlan } from '@/composables/useRunPlan';
import PlannerPage from '@/pages/PlannerPage.vue';
import RigPage from '@/pages/RigPage.vue';
import { useSession } from '@/stores/useSession';
import { metreRig, tenDegrees } from '../../factories/captures';
import { eventually } from '../../support/eventually';
import { mountApp } from '../support/mountApp';
import { json, plugIn } from '../support/network';

beforeEach(() => {
  plugIn(() => json({ me: null }));
});
let wrapper: VueWrapper;
afterEach(() => wrapper.unmount());

const fieldOf = (label: string) =>
  wrapper.find<HTMLInputElement>(
    `[id="${wrapper
      .findAll('label')
      .find((one) => one.text() === label)!
      .attributes('for')}"]`,
  );
const beside = async () => {
  await eventually(() => expect(wrapper.text()).toContain('Is this plan good enough?'));
  return wrapper.findAll('.fold-block').find((one) => one.text().includes('Is this plan good enough?'))!;
};
const button = (name: RegExp) => wrapper.findAll('button').find((one) => name.test(one.text()));
const quarterMetre = { ...metreRig, bob_diameter_um: null, length_readings: [{ to: 'centre' as const, um: 250_000 }] };

it('the planner stands beside the plan of the rig page, weighs it, and hands its answer back', async () => {
  wrapper = mountApp(RigPage).wrapper;
  const fold = await beside();
  const planned = fieldOf('Swings in the run');
  expect(planned.element.value).toBe('20');
  await fold.trigger('toggle');
  await eventually(() => expect(button(/^Use 24 swings$/)).toBeDefined());
  // 1 m, 10°, 70 ms: n(n + 1)(n + 2) = 12 (70/2)² gives 24 (tests/reference/hand-timing.json).
  expect(fold.text()).toContain('No length is given yet');
  expect(fold.text()).toMatch(/20 swings take \d+ s; the amplitude falls from 10\.0°/);
  await button(/^Use 24 swings$/)!.trigger('click');
  expect(planned.element.value).toBe('24');
});

it('a field of the planner that cannot be read does not hold back the rig', async () => {
  const mounted = mountApp(RigPage);
  wrapper = mounted.wrapper;
  const fold = await beside();
  await fold.trigger('toggle');
  await eventually(() => expect(fold.text()).toContain('Standard uncertainty wanted'));
  await fieldOf('Standard uncertainty wanted').setValue('fine');
  await button(/^Go to the pad$/)!.trigger('click');
  await eventually(() => expect(mounted.router.currentRoute.value.name).toBe('pad'));
});

it('the planner’s own page takes the plan in force, and its answer goes into it', async () => {
  const mounted = mountApp(PlannerPage);
  wrapper = mounted.wrapper;
  await useSession().ready;
  const plan = { swings_per_mark: 1, planned_swings: 10, rig: quarterMetre, amplitudes: tenDegrees.slice(0, 1) };
  await useRunPlan().keep(plan);
  wrapper.unmount();
  wrapper = mountApp(PlannerPage, {}, mounted.router).wrapper;
  await eventually(() => expect(fieldOf('Pivot to centre of bob').element.value).toBe('0.25'));
  expect(fieldOf('Swings in a run').element.value).toBe('10');
  // T is half as long, so n(n + 1)(n + 2) is four times as large.
  await eventually(() => expect(button(/^Use 38 swings$/)).toBeDefined());
  await button(/^Use 38 swings$/)!.trigger('click');
  await eventually(() => expect(mounted.router.currentRoute.value.name).toBe('pad'));
  const kept = useRunPlan();
  await kept.load();
  expect(kept.current()).toEqual({ ...plan, planned_swings: 38 });
});
