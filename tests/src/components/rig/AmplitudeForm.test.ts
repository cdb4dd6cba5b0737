import 'fake-indexeddb/auto';
import { describe, expect, it } from 'vitest';
import { defineComponent, h, nextTick, ref, type Ref } from 'vue';
import AmplitudeForm from '@/components/rig/AmplitudeForm.vue';
import { AmplitudeReading, type Rig } from '@shared/schemas/rig';
import { mountApp } from '../../support/mountApp';

const rig: Rig = {
  kind: 'string_bob',
  length_readings: [{ to: 'centre', um: 1_000_000 }],
  bob_diameter_um: null,
  length_u_um: 1_000,
  bar_length_um: null,
  pivot_offset_um: null,
  label: '',
};

function form(given: AmplitudeReading[] = [], props: { endSwing?: number; rig?: Rig } = {}) {
  const readings: Ref<AmplitudeReading[]> = ref(given);
  const page = defineComponent(
    () => () =>
      h(AmplitudeForm, {
        ...props,
        modelValue: readings.value,
        'onUpdate:modelValue': (now: AmplitudeReading[]) => (readings.value = now),
      }),
  );
  const { wrapper } = mountApp(page);
  const field = (label: string) => {
    const found = wrapper.findAll('label').find((candidate) => candidate.text() === label)!;
    return wrapper.find(`[id="${found.attributes('for')}"]`);
  };
  return { readings, wrapper, field };
}

describe('AmplitudeForm', () => {
  it('takes an angle at the start, off by one degree unless told', async () => {
    const { readings, field } = form();
    await field('At the start').setValue('20,5');
    expect(readings.value).toEqual([{ swing: 0, as_read: { form: 'angle', mdeg: 20_500 }, u: 1_000 }]);
    expect(AmplitudeReading.parse(readings.value[0])).toEqual(readings.value[0]);
  });

  it('asks for the end only when there is one, and leaves readings in between alone', async () => {
    const between: AmplitudeReading = { swing: 10, as_read: { form: 'angle', mdeg: 15_000 }, u: 500 };
    expect(form().wrapper.text()).not.toContain('At the end');
    const { readings, field } = form([between], { endSwing: 20 });
    await field('At the end, swing 20').setValue('12');
    expect(readings.value).toEqual([between, { swing: 20, as_read: { form: 'angle', mdeg: 12_000 }, u: 1_000 }]);
  });

  it('takes a sideways distance at the length of the rig and says the angle', async () => {
    const { readings, wrapper, field } = form([], { rig });
    await wrapper.find('input[value="sideways"]').setValue();
    await field('At the start').setValue('17.4');
    expect(readings.value[0]).toMatchObject({
      as_read: { form: 'sideways', sideways_um: 174_000, length_um: 1_000_000 },
    });
    expect(wrapper.text()).toContain('That is 10.0° from rest');
  });

  it('asks for the length when the rig does not say it', async () => {
    const { readings, wrapper, field } = form();
    await wrapper.find('input[value="sideways"]').setValue();
    await field('At the start').setValue('17.4');
    await field('At the start').trigger('blur');
    expect(readings.value).toEqual([]);
    expect(wrapper.text()).toContain('Give the length, or the angle instead.');
    await field('Pivot to where it was read').setValue('100');
    expect(readings.value).toHaveLength(1);
  });

  it('refuses a distance as long as the string, and says why', async () => {
    const { readings, wrapper, field } = form([], { rig });
    await wrapper.find('input[value="sideways"]').setValue();
    await field('At the start').setValue('100');
    await field('At the start').trigger('blur');
    expect(readings.value).toEqual([]);
    expect(wrapper.text()).toContain('not shorter than the length');
  });

  it.each([
    ['0,17', 'radians'],
    ['75', 'rigid arm'],
  ])('takes %s° with a word of caution', async (typed, caution) => {
    const { readings, wrapper, field } = form();
    await field('At the start').setValue(typed);
    expect(readings.value).toHaveLength(1);
    expect(wrapper.text()).toContain(caution);
  });

  it('takes nothing beyond 179°', async () => {
    const { readings, wrapper, field } = form();
    await field('At the start').setValue('180');
    await field('At the start').trigger('focusout');
    expect(readings.value).toEqual([]);
    expect(wrapper.text()).toContain('is not between 0.001° and 179°');
  });

  it('shows readings that are put in from outside', async () => {
    const { readings, field } = form();
    readings.value = [{ swing: 0, as_read: { form: 'angle', mdeg: 8_000 }, u: 500 }];
    await nextTick();
    await nextTick();
    expect((field('At the start').element as HTMLInputElement).value).toBe('8');
  });
});
