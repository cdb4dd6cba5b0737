import type { RouteRecordRaw } from 'vue-router';

declare module 'vue-router' {
  interface RouteMeta {
    /** Who may open it; without it anybody, signed in or not. */
    needs?: 'staff' | 'coordinator';
  }
}

const FieldLayout = () => import('@/layouts/FieldLayout.vue');
const DoorLayout = () => import('@/layouts/DoorLayout.vue');
const DeskLayout = () => import('@/layouts/DeskLayout.vue');

export const routes: RouteRecordRaw[] = [
  {
    path: '/',
    component: DoorLayout,
    children: [
      { path: '', name: 'start', component: () => import('@/pages/StartPage.vue') },
      { path: 'join/:code?', name: 'join', component: () => import('@/pages/JoinPage.vue') },
      { path: 'return', name: 'return', component: () => import('@/pages/ReturnPage.vue') },
      { path: 'sign-in', name: 'signIn', component: () => import('@/pages/SignInPage.vue') },
      { path: 'set-up/:token', name: 'setUp', component: () => import('@/pages/SetUpPage.vue') },
      { path: 'invite/:token', name: 'invite', component: () => import('@/pages/InvitePage.vue') },
      { path: 'forgot', name: 'forgot', component: () => import('@/pages/ForgotPage.vue') },
      { path: 'reset/:token', name: 'reset', component: () => import('@/pages/ResetPage.vue') },
    ],
  },
  {
    path: '/bench/pad',
    component: () => import('@/layouts/PadLayout.vue'),
    children: [{ path: '', name: 'pad', component: () => import('@/pages/PadPage.vue') }],
  },
  {
    path: '/bench',
    component: FieldLayout,
    children: [
      { path: '', name: 'bench', component: () => import('@/pages/BenchPage.vue') },
      { path: 'rig', name: 'rig', component: () => import('@/pages/RigPage.vue') },
      { path: 'plan', name: 'planner', component: () => import('@/pages/PlannerPage.vue') },
      { path: 'key-in', name: 'keyIn', component: () => import('@/pages/KeyInPage.vue') },
      { path: 'gate', name: 'gate', component: () => import('@/pages/GatePage.vue') },
      { path: 'runs/:id', name: 'run', component: () => import('@/pages/RunPage.vue') },
      { path: '/hand-in', name: 'handIn', component: () => import('@/pages/HandInPage.vue') },
      { path: '/settings', name: 'settings', component: () => import('@/pages/SettingsPage.vue') },
    ],
  },
  {
    path: '/desk',
    component: DeskLayout,
    meta: { needs: 'staff' },
    children: [
      { path: '', name: 'desk', component: () => import('@/pages/DeskPage.vue') },
      { path: 'classes/:id', name: 'deskClass', component: () => import('@/pages/DeskClassPage.vue') },
      { path: 'runs/:id', name: 'deskRun', component: () => import('@/pages/DeskRunPage.vue') },
      {
        path: 'people',
        name: 'people',
        component: () => import('@/pages/PeoplePage.vue'),
        meta: { needs: 'coordinator' },
      },
    ],
  },
  {
    path: '/board/:pass',
    component: () => import('@/layouts/BoardLayout.vue'),
    children: [{ path: '', name: 'board', component: () => import('@/pages/BoardPage.vue') }],
  },
  {
    path: '/:rest(.*)*',
    component: DoorLayout,
    children: [{ path: '', name: 'notFound', component: () => import('@/pages/NotFoundPage.vue') }],
  },
];
