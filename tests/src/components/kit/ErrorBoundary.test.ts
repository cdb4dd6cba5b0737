import { flushPromises, mount } from '@vue/test-utils';
import { Quasar } from 'quasar';
import { expect, it } from 'vitest';
import { defineComponent, h, ref } from 'vue';
import { createMemoryHistory, createRouter } from 'vue-router';
import ErrorBoundary from '@/components/kit/ErrorBoundary.vue';
import { i18n } from '@/i18n';

const Broken = defineComponent(() => () => {
  throw new TypeError('nothing to read there');
});
const Form = defineComponent(() => () => h('form', { onSubmit: () => Promise.reject(new Error('storage is gone')) }));

async function hold(page: ReturnType<typeof defineComponent>) {
  const router = createRouter({
    history: createMemoryHistory(),
    routes: [{ path: '/:any*', component: { template: '<i />' } }],
  });
  await router.push('/here');
  const told: unknown[] = [];
  const isOpen = ref(false);
  const wrapper = mount(ErrorBoundary, {
    slots: { default: () => (isOpen.value ? h(page) : null) },
    global: { plugins: [[Quasar, {}], i18n, router], config: { errorHandler: (cause) => void told.push(cause) } },
  });
  isOpen.value = true;
  await flushPromises();
  return { wrapper, router, told };
}
const notice = 'A part of this page could not be shown';

it('a page that cannot be drawn leaves words and a way on in its place, and the error is reported', async () => {
  const { wrapper, told } = await hold(Broken);
  expect(wrapper.get('[role="alert"]').text()).toContain(notice);
  expect(wrapper.text()).toContain('Load the page again');
  expect(told).toHaveLength(1);
});

it('an action that breaks is told above the page, which stays as it is until the next address', async () => {
  const { wrapper, router } = await hold(Form);
  expect(wrapper.text()).not.toContain(notice);
  await wrapper.get('form').trigger('submit');
  await flushPromises();
  expect(wrapper.text()).toContain(notice);
  expect(wrapper.find('form').exists()).toBe(true);
  await router.push('/there');
  await flushPromises();
  expect(wrapper.text()).not.toContain(notice);
});
