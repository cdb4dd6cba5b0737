import 'fake-indexeddb/auto';
import { RouterView } from 'vue-router';
// The routes fetch these when first opened; here they stand before the first test's time runs.
import '@/layouts/DeskLayout.vue';
import '@/layouts/DoorLayout.vue';
import '@/layouts/FieldLayout.vue';
import '@/pages/BenchPage.vue';
import '@/pages/DeskPage.vue';
import '@/pages/SignInPage.vue';
import { afterEach, expect, it } from 'vitest';
import type { StaffRole } from '@shared/schemas/accounts';
import { router } from '@/router';
import { useSession } from '@/stores/useSession';
import { mountApp } from '../support/mountApp';
import { json, plugIn } from '../support/network';
import { eventually } from '../../support/eventually';

const staff = (kind: StaffRole) => ({
  kind,
  id: '018f0000-0000-7000-8000-0000000b0007',
  name: 'Jo Finch',
  email: 'jo@example.org',
});

let close: () => void = () => undefined;
afterEach(() => close());

/** Signs in through the page, asked for at an address of the app. */
async function signIn(kind: StaffRole, at: string) {
  plugIn((path) => {
    if (path === '/api/sign-in' || path === '/api/me') return json({ me: staff(kind) });
    return path === '/api/classes' ? json({ classes: [] }) : json({ done: true });
  });
  const { wrapper } = mountApp(RouterView, {}, router);
  close = () => wrapper.unmount();
  await useSession().ready;
  await router.push(at);
  await eventually(() => expect(wrapper.find('input[type="email"]').exists()).toBe(true));
  await wrapper.get('input[type="email"]').setValue('jo@example.org');
  await wrapper.get('input[type="password"]').setValue('seven brass bobs');
  await wrapper.get('form').trigger('submit');
}
const path = () => router.currentRoute.value.path;

it.each([
  ['volunteer', '/sign-in', '/bench'],
  ['volunteer', '/sign-in?to=/desk', '/bench'],
  ['teacher', '/sign-in', '/desk'],
  ['coordinator', '/sign-in', '/desk'],
] as const)('a %s who signs in at %s comes to %s', async (kind, at, to) => {
  await signIn(kind, at);
  await eventually(() => expect(path()).toBe(to));
});

it('a page that is not for somebody leads to where their work is', async () => {
  await signIn('teacher', '/sign-in');
  await eventually(() => expect(path()).toBe('/desk'));
  await router.push('/desk/people');
  expect(path()).toBe('/desk');
});
