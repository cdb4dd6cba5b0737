import { mount } from '@vue/test-utils';
import { createPinia, setActivePinia } from 'pinia';
import { Quasar } from 'quasar';
import type { Component } from 'vue';
import { createMemoryHistory, createRouter, type RouteLocationRaw } from 'vue-router';
import { i18n, loadTexts } from '@/i18n';
import { routes } from '@/router/routes';

// The router brings them before the first page; here there may be no page.
await loadTexts();

/** Mounts a component the way main.ts mounts the app: real stores, real messages, real routes. */
export function mountApp(component: Component, props: Record<string, unknown> = {}, router = newRouter()) {
  const pinia = createPinia();
  setActivePinia(pinia);
  const wrapper = mount(component, {
    props,
    attachTo: document.body,
    global: { plugins: [pinia, [Quasar, {}], i18n, router] },
  });
  return { wrapper, router };
}

/** Mounts a page once its address is reached, so that it finds its parameters. */
export async function mountPage(page: Component, at: RouteLocationRaw) {
  const router = newRouter();
  await router.push(at);
  return mountApp(page, {}, router);
}

/** Begins at an address of its own: the page at '/' would go on loading after a short test has ended. */
function newRouter() {
  const history = createMemoryHistory();
  history.replace('/mounted');
  return createRouter({ history, routes: [...routes, { path: '/mounted', component: { render: () => null } }] });
}
