import { mount } from '@vue/test-utils';
import { expect, it } from 'vitest';
import UnitField from '@/components/kit/UnitField.vue';

const field = (text: string) =>
  mount(UnitField, {
    props: {
      label: 'Length',
      unit: 'cm',
      modelValue: text,
      check: (typed: string) => (/^\d+([.,]\d+)?$/.test(typed) ? null : `“${typed}” is not a number`),
    },
  });

it('keeps the text as typed, comma and all', async () => {
  const shown = field('');
  await shown.find('input').setValue(' 1,250 ');
  expect(shown.emitted('update:modelValue')).toEqual([[' 1,250 ']]);
});

it('says nothing about a number that is still being typed', async () => {
  const shown = field('abc');
  await shown.find('input').trigger('input');
  expect(shown.find('[role=alert]').exists()).toBe(false);
});

it('says what it saw once the field is left, and ties it to the box', async () => {
  const shown = field('abc');
  await shown.find('input').trigger('blur');
  const alert = shown.get('[role=alert]');
  expect(alert.text()).toBe('“abc” is not a number');
  expect(shown.get('input').attributes('aria-describedby')).toContain(alert.attributes('id'));
  expect(shown.get('input').attributes('aria-invalid')).toBe('true');
});

it('names the unit to those who listen', () => {
  const shown = field('1');
  const ids = shown.get('input').attributes('aria-describedby')!.split(' ');
  expect(ids.map((id) => shown.get(`#${CSS.escape(id)}`).text())).toContain('cm');
});
