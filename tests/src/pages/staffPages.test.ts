import 'fake-indexeddb/auto';
import { flushPromises, type VueWrapper } from '@vue/test-utils';
import { afterEach, beforeEach, expect, it } from 'vitest';
import { defineComponent, h, ref, type Component } from 'vue';
import type { RouteLocationRaw } from 'vue-router';
import { json, plugIn, said, type SentRequest } from '../support/network';
import { mountPage } from '../support/mountApp';
import { CLASS_ID } from '../support/samples';
import DeskClassPage from '@/pages/DeskClassPage.vue';
import DeskPage from '@/pages/DeskPage.vue';
import PeoplePage from '@/pages/PeoplePage.vue';
import { useSession } from '@/stores/useSession';
import { eventually } from '../../support/eventually';

const COLLEAGUE = '018f0000-0000-7000-8000-0000000b0002';
const [WREN, KITE] = ['018f0000-0000-7000-8000-0000000a0001', '018f0000-0000-7000-8000-0000000a0002'];
const staff = [{ id: COLLEAGUE, name: 'Sam Reed', email: 'sam@example.org', role: 'teacher', disabled: false }];

/** A server with one class and one colleague; it sends mail or not, and Kite has handed in a run. */
let mails: boolean;
let sent: SentRequest[];
let students: { id: string; bench: number; nickname: string }[];
beforeEach(() => {
  mails = false;
  students = [
    { id: WREN!, bench: 1, nickname: 'Wren' },
    { id: KITE!, bench: 2, nickname: 'Kite' },
  ];
  const view = () => ({
    id: CLASS_ID,
    name: '11B Physics',
    teacher_word: 'plumb',
    code: 'K4R7MP',
    board_pass: 'pass',
    created_wall_ms: 1,
    students,
    runs: 1,
  });
  sent = plugIn((path, { method }) => {
    if (path === '/api/people') return json({ staff, invites: [] });
    if (path.endsWith('/reset-link'))
      return json({ link: mails ? null : 'https://swaymark.example/reset/0123456789abcdef' });
    if (path === '/api/classes') return json({ classes: [view()] });
    if (path === `/api/classes/${CLASS_ID}`) return json({ class: view() });
    if (method === 'DELETE' && path.endsWith(KITE!)) return said(409, 'has_runs', 'Kite has handed in one run.');
    if (method === 'DELETE') {
      students = students.filter(({ id }) => !path.endsWith(id));
      return json({ done: true });
    }
    return json({ me: null });
  });
});
let close: () => void = () => undefined;
afterEach(() => close());

/** As behind the router's guard: the page opens once it is known who is here. */
const guarded = (page: Component) =>
  defineComponent(() => {
    const isReady = ref(false);
    void useSession().ready.then(() => (isReady.value = true));
    return () => (isReady.value ? h(page) : null);
  });

async function open(page: Component, at: RouteLocationRaw, shows: string) {
  const { wrapper } = await mountPage(guarded(page), at);
  close = () => wrapper.unmount();
  await eventually(() => expect(wrapper.text()).toContain(shows));
  return wrapper;
}
async function press(page: VueWrapper, name: string) {
  const named = (button: { text(): string; attributes(name: string): string | undefined }) =>
    (button.attributes('aria-label') ?? button.text()) === name;
  await page.findAll('button').find(named)!.trigger('click');
  await flushPromises();
}

it('a reset link is shown to pass on when the server sends no mail', async () => {
  const page = await open(PeoplePage, { name: 'people' }, 'Sam Reed');
  await press(page, 'Reset link for Sam Reed');
  await eventually(() => expect(page.text()).toContain('https://swaymark.example/reset/0123456789abcdef'));
  expect(sent.find(({ path }) => path === `/api/people/${COLLEAGUE}/reset-link`)!.method).toBe('POST');
});

it('a reset link that was mailed is not shown', async () => {
  mails = true;
  const page = await open(PeoplePage, { name: 'people' }, 'Sam Reed');
  await press(page, 'Reset link for Sam Reed');
  await eventually(() => expect(page.text()).toContain('on its way to Sam Reed'));
  expect(page.text()).not.toContain('https://');
});

it('a student without runs is removed after being asked once', async () => {
  const page = await open(DeskClassPage, { name: 'deskClass', params: { id: CLASS_ID } }, 'Wren');
  await press(page, 'Remove Wren, bench 1');
  expect(sent.some(({ method }) => method === 'DELETE')).toBe(false);
  await press(page, 'Remove');
  await eventually(() => expect(page.text()).not.toContain('Wren'));
});

it('a student with runs stays, and the server’s reason is told', async () => {
  const page = await open(DeskClassPage, { name: 'deskClass', params: { id: CLASS_ID } }, 'Kite');
  await press(page, 'Remove Kite, bench 2');
  await press(page, 'Remove');
  await eventually(() => expect(page.text()).toContain('Kite has handed in one run.'));
});

it('classes that came from the server are word from the server', async () => {
  const page = await open(DeskPage, { name: 'desk' }, '11B Physics');
  expect(page.text()).toContain('In touch with the server');
});
