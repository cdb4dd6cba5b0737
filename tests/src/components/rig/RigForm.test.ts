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

  it('shows a rig that is put in from outside', async () => {
    const { rig, field } = form(string);
    rig.value = { ...string, length_readings: [{ to: 'bottom', um: 1_234_000 }] };
    await Promise.resolve();
    await new Promise((done) => setTimeout(done));
    expect((field('Pivot to bob, reading 1').element as HTMLInputElement).value).toBe('123.4');
  });
});
