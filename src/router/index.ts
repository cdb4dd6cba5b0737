import { createRouter, createWebHistory } from 'vue-router';
import { notePartMissing } from '@/composables/useAppUpdate';
import { loadTexts } from '@/i18n';
import { useSession } from '@/stores/useSession';
import { routes } from './routes';

export const router = createRouter({
  history: createWebHistory(),
  routes,
  scrollBehavior: (_to, _from, saved) => saved ?? { top: 0 },
});

/** The server decides who may do what; this only spares people a page they could not use. */
router.beforeEach(async (to) => {
  const { needs } = to.meta;
  if (!needs) return true;
  const session = useSession();
  await session.ready;
  if (!session.isStaff) return { name: 'signIn', query: { to: to.fullPath } };
  const may = needs === 'staff' ? session.home === '/desk' : session.me?.kind === needs;
  return may || session.home;
});

/** The pad has its texts from the start; the others come before the first page that shows them. */
router.beforeEach(async (to) => {
  if (to.name !== 'pad') await loadTexts();
});

/** Where the page begins for somebody who listens to it. */
router.afterEach((to, from) => {
  if (from.matched.length === 0 || to.path === from.path) return;
  requestAnimationFrame(() => document.getElementById('main')?.focus({ preventScroll: true }));
});

/** A page's file could not be fetched: the line at the top says so; what was on the screen stays. */
router.onError(notePartMissing);
