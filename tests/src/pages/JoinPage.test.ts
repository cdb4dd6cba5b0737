import 'fake-indexeddb/auto';
import { RouterView } from 'vue-router';
// The route fetches both when first opened; here they stand before the first test's time runs.
import '@/layouts/DoorLayout.vue';
import '@/pages/JoinPage.vue';
import { afterEach, beforeEach, expect, it, vi } from 'vitest';
import { flushPromises, type VueWrapper } from '@vue/test-utils';
import { json, plugIn, said, type SentRequest } from '../support/network';
import { mountApp } from '../support/mountApp';
import { student } from '../support/samples';
import { eventually } from '../../support/eventually';

const card = { name: '11B', teacher_word: 'plumb', benches: [{ bench: 3, people: 2 }] };
const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/;
let sent: SentRequest[];
let takes = true;
beforeEach(() => {
  takes = true;
  sent = plugIn((path) => {
    if (path === '/api/classes/look-up') return json(card);
    if (path === '/api/join')
      return takes
        ? json({ me: student(7), pin: '204611' })
        : said(409, 'name_taken', 'Bench 7 has a Kite.', 'nickname');
    return json({ me: null });
  });
});
let close: () => void = () => undefined;
afterEach(() => {
  vi.restoreAllMocks();
  close();
});
async function mountAt(path: string) {
  const { wrapper, router } = mountApp(RouterView);
  close = () => wrapper.unmount();
  await router.push(path);
  await flushPromises();
  return wrapper;
}
const sentTo = (path: string) => sent.filter((request) => request.path === path);

it('a link with the code shows the class and its word at once', async () => {
  const page = await mountAt('/join/k4r-7mp');
  await eventually(() => expect(page.text()).toContain('plumb'));
  expect(sentTo('/api/classes/look-up')[0]!.body).toEqual({ code: 'K4R7MP' });
  expect(page.text()).toContain('2 here');
});

it('bench and nickname join, and the PIN is shown', async () => {
  const page = await mountAt('/join/K4R7MP');
  await eventually(() => expect(page.text()).toContain('plumb'));
  await page.get('input[value="7"]').setValue();
  await page.get('input[maxlength="24"]').setValue(' Kite ');
  await page.get('form').trigger('submit');
  await eventually(() => expect(page.text()).toContain('Write this PIN down'));
  expect(page.text()).toContain('204');
  await joined(page);
  expect(sentTo('/api/join')[0]!.body).toEqual({
    code: 'K4R7MP',
    bench: 7,
    nickname: 'Kite',
    join_id: expect.stringMatching(UUID) as string,
  });
});

/** The PIN shows before the phone has kept who joined; the way on opens after. */
const joined = (page: VueWrapper) =>
  eventually(() => expect(page.findAll('button').at(-1)!.attributes('disabled')).toBeUndefined());

it('a joining sent again because its answer was lost has the same id, another nickname another', async () => {
  takes = false;
  const page = await mountAt('/join/K4R7MP');
  await eventually(() => expect(page.text()).toContain('plumb'));
  await page.get('input[value="7"]').setValue();
  for (const [i, name] of ['Kite', 'Kite', 'Wren', 'Kite'].entries()) {
    await page.get('input[maxlength="24"]').setValue(name);
    await page.get('form').trigger('submit');
    await eventually(() => expect(sentTo('/api/join')).toHaveLength(i + 1));
    await eventually(() => expect(page.text()).toContain('Bench 7 has a Kite.'));
  }
  const [first, again, other, back] = sentTo('/api/join').map(({ body }) => (body as { join_id: string }).join_id);
  expect([again, back]).toEqual([first, first]);
  expect(other).not.toBe(first);
});

it('a joining whose answer was lost is the same joining after a reload, and another one once it was answered', async () => {
  let isLost = true;
  sent = plugIn((path) => {
    if (path === '/api/classes/look-up') return json(card);
    if (path === '/api/join' && isLost) throw new TypeError('no network');
    return json(path === '/api/join' ? { me: student(7), pin: '204611' } : { me: null });
  });
  const join = async () => {
    const page = await mountAt('/join/K4R7MP');
    await eventually(() => expect(page.text()).toContain('plumb'));
    await page.get('input[value="7"]').setValue();
    await page.get('input[maxlength="24"]').setValue('Lost Kite');
    const before = sentTo('/api/join').length;
    await page.get('form').trigger('submit');
    await eventually(() => expect(sentTo('/api/join')).toHaveLength(before + 1));
    await eventually(() => expect(page.text()).toContain(isLost ? 'not reached' : 'Write this PIN down'));
    if (!isLost) await joined(page);
    page.unmount();
  };
  await join();
  isLost = false;
  await join();
  await join();
  const [lost, again, other] = sentTo('/api/join').map(({ body }) => (body as { join_id: string }).join_id);
  expect(again).toBe(lost);
  expect(other).not.toBe(lost);
});

it('the PIN is shown though the phone cannot keep who joined', async () => {
  const page = await mountAt('/join/K4R7MP');
  await eventually(() => expect(page.text()).toContain('plumb'));
  await page.get('input[value="7"]').setValue();
  await page.get('input[maxlength="24"]').setValue('Kite');
  vi.spyOn(IDBObjectStore.prototype, 'put').mockImplementation(() => {
    throw new DOMException('no room is left', 'QuotaExceededError');
  });
  await page.get('form').trigger('submit');
  await eventually(() => expect(page.find('[role="alert"]').exists()).toBe(true));
  expect(page.get('.pin-card__pin').text()).toContain('204');
});

it('a taken name is said beside the field, and what was typed stays', async () => {
  takes = false;
  const page = await mountAt('/join/K4R7MP');
  await eventually(() => expect(page.text()).toContain('plumb'));
  await page.get('input[value="7"]').setValue();
  await page.get('input[maxlength="24"]').setValue('Kite');
  await page.get('form').trigger('submit');
  await eventually(() => expect(page.text()).toContain('Bench 7 has a Kite.'));
  expect((page.get('input[maxlength="24"]').element as HTMLInputElement).value).toBe('Kite');
});

it('a code that cannot be one is not sent anywhere', async () => {
  const page = await mountAt('/join');
  await page.get('input').setValue('K4R');
  await page.get('form').trigger('submit');
  await flushPromises();
  expect(page.text()).toContain('six letters or digits');
  expect(sentTo('/api/classes/look-up')).toEqual([]);
});
