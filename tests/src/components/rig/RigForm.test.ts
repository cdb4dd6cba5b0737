import 'fake-indexeddb/auto';
import { describe, expect, it } from 'vitest';
import { defineComponent, h, ref, type Ref } from 'vue';
import RigForm from '@/components/rig/RigForm.vue';
import { useFormProblems } from '@/composables/useFieldProblems';
import { Rig } from '@shared/schemas/rig';
import { mountApp } from '../../support/mountApp';

/** The form inside a page that counts its problems. */
function form(given: Rig | null = null) {
  const rig: Ref<Rig | null> = ref(given);
  let problems!: ReturnType<typeof useFormProblems>;
  const page = defineComponent(() => {
    problems = useFormProblems();
    return () => h(RigForm, { modelValue: rig.value, 'onUpdate:modelValue': (now: Rig | null) => (rig.value = now) });
  });
  const { wrapper } = mountApp(page);
  const field = (label: string) => {
    const found = wrapper.findAll('label').find((candidate) => candidate.text() === label);
    if (!found) throw new Error(`no field is labelled ${label}`);
    return wrapper.find(`[id="${found.attributes('for')}"]`);
  };
  const choose = (kind: string) => wrapper.find(`input[value="${kind}"]`).setValue();
  return { rig, wrapper, field, choose, problems };
}

const string: Rig = {
  kind: 'string_bob',
  length_readings: [{ to: 'top', um: 985_000 }],
  bob_diameter_um: 30_000,
  length_u_um: 1_000,
  bar_length_um: null,
  pivot_offset_um: null,
  label: '',
};

describe('RigForm', () => {
  it('asks for nothing but the kind at first, and gives no rig', () => {
    const { rig, wrapper } = form();
    expect(rig.value).toBeNull();
    expect(wrapper.findAll('input[type="text"]')).toHaveLength(0);
  });

  it('gives a rig that keeps the schema from a length typed in centimetres with a comma', async () => {
    const { rig, field, choose } = form();
    await choose('string_bob');
    await field('Pivot to bob, reading 1').setValue('99,5');
    expect(Rig.parse(rig.value)).toEqual(rig.value);
    expect(rig.value?.length_readings).toEqual([{ to: 'centre', um: 995_000 }]);
  });

  it('says the centre it computed from the top of the bob and its diameter', () => {
    const { wrapper } = form(string);
    expect(wrapper.text()).toContain('Pivot to centre of bob: 1.0000');
  });

  it('asks for the diameter when only the top of the bob was met', () => {
    const { wrapper } = form({ ...string, bob_diameter_um: null });
    expect(wrapper.text()).toContain('Needed: without it');
  });

  it('keeps a text it cannot read, says so beside the box, and reports one problem', async () => {
    const { rig, field, choose, problems, wrapper } = form();
    await choose('string_bob');
    const length = field('Pivot to bob, reading 1');
    await length.setValue('about a metre');
    await length.trigger('blur');
    expect((length.element as HTMLInputElement).value).toBe('about a metre');
    expect(wrapper.text()).toContain('“about a metre” does not read as a number');
    expect(problems.count.value).toBe(1);
    expect(rig.value?.length_readings).toEqual([]);
  });

  it('offers the unit that fits when centimetres were typed as metres', async () => {
    const { rig, field, choose, wrapper } = form();
    await choose('string_bob');
    await wrapper.find('select[aria-label^="Unit of: Pivot to bob"]').setValue('m');
    await field('Pivot to bob, reading 1').setValue('45');
    const fix = wrapper.findAll('button').find((button) => button.text() === 'Take it as 45 cm')!;
    await fix.trigger('click');
    expect(rig.value?.length_readings).toEqual([{ to: 'centre', um: 450_000 }]);
  });

  it('asks a bar for its length and its pivot, and keeps what a string was given', async () => {
    const { rig, field, choose } = form(string);
    await choose('bar');
    await field('Whole length of the bar').setValue('100');
    await field('From its middle to the pivot').setValue('28,9');
    expect(rig.value).toMatchObject({ kind: 'bar', bar_length_um: 1_000_000, pivot_offset_um: 289_000 });
    expect(rig.value?.length_readings).toEqual(string.length_readings);
  });

  it('takes masses in grams and stiffness behind the small print, and leaves out what is cleared again', async () => {
    const { rig, field } = form(string);
    await field('Mass of the bob').setValue('111,5');
    await field('Mass of the string').setValue('0.3');
    await field('Stiffness of the support').setValue('10 000');
    expect(Rig.parse(rig.value)).toEqual({
      ...string,
      bob_mass_mg: 111_500,
      string_mass_mg: 300,
      support_stiffness_n_per_m: 10_000,
    });
    for (const label of ['Mass of the bob', 'Mass of the string', 'Stiffness of the support']) {
      await field(label).setValue('');
    }
    expect(Object.keys(rig.value!)).toEqual(Object.keys(string));
  });

  it('shows a string nothing of hubs, and folds what is more than lengths', () => {
    const { wrapper } = form(string);
    const fold = wrapper.find('details');
    expect((fold.element as HTMLDetailsElement).open).toBe(false);
    expect(fold.text()).toContain('Mass of the bob');
    expect(wrapper.text()).not.toContain('hub');
    expect(wrapper.text()).not.toContain('still needed');
  });

  it('asks a bar with a bob for both masses in the open, and says what g still needs', async () => {
    const { rig, field, choose, wrapper } = form(string);
    await choose('bar_bob');
    expect(wrapper.text()).toContain(
      'For g still needed: length of the bar, or across, from its middle to the pivot, mass of the bar or body, mass of the bob.',
    );
    await field('Whole length of the bar').setValue('90');
    await field('From its middle to the pivot').setValue('45');
    await field('Mass of the bar').setValue('120');
    await field('Mass of the bob').setValue('500');
    expect(wrapper.text()).not.toContain('still needed');
    expect(rig.value).toMatchObject({ bar_mass_mg: 120_000, bob_mass_mg: 500_000 });
  });

  it('asks something else for its centre of mass and radius of gyration, and takes a hub in g cm²', async () => {
    const { rig, field, choose } = form();
    await choose('other');
    await field('Pivot to centre of mass').setValue('35,6');
    await field('Radius of gyration about the centre of mass').setValue('18,5');
    await field('Mass of what swings').setValue('250');
    await field('Moment of inertia of the hub or clamp').setValue('1000');
    expect(Rig.parse(rig.value)).toMatchObject({
      centre_distance_um: 356_000,
      gyration_um: 185_000,
      bar_mass_mg: 250_000,
      // 1e-4 kg m².
      hub_inertia_g_mm2: 100_000,
    });
  });

  it.each([
    ['ring', 'Across, inside', '21', 'as wide inside as outside, or wider'],
    ['ring', 'Mass of the ring', '200 000', '“200 000” g is not between 0.001 and 100000 g'],
    ['ring', 'Stiffness of the support', '5', '“5” N/m is not between 100'],
  ])('says of a %s with “%s” %s: %s', async (kind, label, typed, words) => {
    const { field, choose, problems, wrapper } = form({ ...string, bar_length_um: 200_000 });
    await choose(kind);
    await field(label).setValue(typed);
    await field(label).trigger('blur');
    await field(label).trigger('focusout');
    expect(wrapper.text()).toContain(words);
    expect(problems.count.value).toBe(1);
  });

  it('shows a rig that is put in from outside', async () => {
    const { rig, field } = form(string);
    rig.value = { ...string, length_readings: [{ to: 'bottom', um: 1_234_000 }] };
    await Promise.resolve();
    await new Promise((done) => setTimeout(done));
    expect((field('Pivot to bob, reading 1').element as HTMLInputElement).value).toBe('123.4');
  });
});
