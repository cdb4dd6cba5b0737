import 'fake-indexeddb/auto';
import { flushPromises } from '@vue/test-utils';
import { v4 as uuidv4 } from 'uuid';
import { afterEach, expect, it } from 'vitest';
import { mountPage } from '../support/mountApp';
import { json, plugIn, said, type Wire } from '../support/network';
import BoardPage from '@/pages/BoardPage.vue';
import { eventually } from '../../support/eventually';

const point = (bench: number, value: number) => ({
  run_id: uuidv4(),
  bench,
  // Twelve degrees of freedom or so: not twice u.
  small_period_s: { value, u: 0.003, expanded_u: 0.0065 },
  length_m: 1,
  open_flags: 0,
});
const answer = (points: object[]) => ({
  class_name: '11B Physics',
  code: 'K4R7MP',
  server_wall_ms: Date.UTC(2030, 2, 12, 9, 42),
  cursor: 4,
  points,
});

const opened: { unmount(): void }[] = [];
afterEach(() => opened.splice(0).forEach((wrapper) => wrapper.unmount()));

async function openBoard(board: Wire) {
  const sent = plugIn((path, init) => (path.includes('/board') ? board(path, init) : json({ me: null })));
  const { wrapper } = await mountPage(BoardPage, { name: 'board', params: { pass: uuidv4() } });
  opened.push(wrapper);
  await eventually(() => expect(sent.some(({ path }) => path.includes('/board'))).toBe(true));
  await flushPromises();
  return wrapper;
}

it('shows the middle of the benches, how many runs, and how to join', async () => {
  const wrapper = await openBoard(() => json(answer([point(1, 2.0), point(2, 2.01), point(3, 2.02)])));
  await eventually(() => expect(wrapper.text()).toContain('11B Physics'));
  expect(wrapper.find('.board-headline__number').text()).toMatch(/^2\.010/);
  expect(wrapper.text()).toContain('3 runs · 3 benches');
  expect(wrapper.text()).toContain('K4R7MP');
  expect(wrapper.find('figcaption').text()).toContain('3 benches, 3 runs');
});

it('waits with the code while no run is there', async () => {
  const wrapper = await openBoard(() => json(answer([])));
  await eventually(() => expect(wrapper.find('.board-waiting__code').text()).toBe('K4R7MP'));
});

it('says that no board is under a link the server does not know', async () => {
  const wrapper = await openBoard(() => said(401, 'board_pass_unknown', 'No board has this pass.'));
  await eventually(() => expect(wrapper.find('h1').text()).toBe('No board under this link'));
});

it('keeps the picture when the network goes and says of when it is', async () => {
  let isUp = true;
  const wrapper = await openBoard(() => {
    if (!isUp) throw new TypeError('no network');
    return json(answer([point(1, 2.0)]));
  });
  await eventually(() => expect(wrapper.text()).toContain('Updated'));
  isUp = false;
  await eventually(() => expect(wrapper.text()).toMatch(/Showing \d\d:\d\d/));
  expect(wrapper.text()).toContain('2.000');
});

it('B blanks, T shows the table, F freezes, and a key with Ctrl is the browser’s', async () => {
  const wrapper = await openBoard(() => json(answer([point(1, 2.0), point(2, 2.01)])));
  await eventually(() => expect(wrapper.text()).toContain('Updated'));
  const main = wrapper.find('main');
  await main.trigger('keydown', { key: 'b' });
  expect(wrapper.text()).not.toContain('11B Physics');
  await main.trigger('keydown', { key: 'b' });
  await main.trigger('keydown', { key: 't' });
  expect(wrapper.findAll('.board-table tbody tr')).toHaveLength(2);
  await main.trigger('keydown', { key: 'f' });
  expect(wrapper.text()).toContain('Frozen');
  await main.trigger('keydown', { key: 'f', ctrlKey: true });
  expect(wrapper.text()).toContain('Frozen');
});

it('takes a run off that was set aside, for good', async () => {
  const [stays, goes] = [point(1, 2.0), point(2, 2.01)];
  const aside = { run_id: goes.run_id, bench: 2, small_period_s: null, length_m: null, open_flags: 0, set_aside: true };
  const pass = uuidv4();
  const open = async (board: Wire) => {
    plugIn((path, init) => (path.includes('/board') ? board(path, init) : json({ me: null })));
    const { wrapper } = await mountPage(BoardPage, { name: 'board', params: { pass } });
    opened.push(wrapper);
    return wrapper;
  };
  const wrapper = await open((path) => json(answer(path.endsWith('after=0') ? [stays, goes] : [aside])));
  await eventually(() => expect(wrapper.text()).toContain('2 runs'));
  await eventually(() => expect(wrapper.text()).toContain('One run'));
  wrapper.unmount();
  const offline = await open(() => {
    throw new TypeError('no network');
  });
  await eventually(() => expect(offline.text()).toContain('Showing'));
  expect(offline.text()).toContain('One run');
});

it('names nobody', async () => {
  const wrapper = await openBoard(() => json(answer([point(4, 2.0)])));
  await eventually(() => expect(wrapper.text()).toContain('Updated'));
  await wrapper.find('main').trigger('keydown', { key: 't' });
  const cells = wrapper.findAll('.board-table tbody td, .board-table tbody th').map((cell) => cell.text());
  expect(cells).toEqual(['4', '2.0000', '0.0065', '1.000', '–']);
});
