import { mount } from '@vue/test-utils';
import { createPinia, setActivePinia } from 'pinia';
import { Quasar } from 'quasar';
import type { Component } from 'vue';
import { createMemoryHistory, createRouter } from 'vue-router';
import { i18n } from '@/i18n';
import { routes } from '@/router/routes';

/** Mounts a component the way main.ts mounts the app: real stores, real messages, real routes. */
export function mountApp(component: Component, props: Record<string, unknown> = {}) {
  const pinia = createPinia();
  setActivePinia(pinia);
  const router = createRouter({ history: createMemoryHistory(), routes });
  const wrapper = mount(component, {
    props,
    attachTo: document.body,
    global: { plugins: [pinia, [Quasar, {}], i18n, router] },
  });
  return { wrapper, router };
}
