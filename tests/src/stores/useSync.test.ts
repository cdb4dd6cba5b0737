import 'fake-indexeddb/auto';
import { IDBFactory } from 'fake-indexeddb';
import { Dexie } from 'dexie';
import { afterEach, beforeEach, expect, it, vi } from 'vitest';
import type { SyncItem } from '@shared/schemas/sync';
import { locksOfOneBrowser } from '../support/locksOfOneBrowser';
import { json, plugIn, type SentRequest, type Wire } from '../support/network';
import { feedAnswer, rawRun, stored, student, syncAnswer, turnedDown } from '../support/samples';
import { eventually } from '../../support/eventually';

const ann = student(1);
const offline: Wire = () => Promise.reject(new TypeError('Failed to fetch'));
/** A server that knows Ann's cookie and takes what it is sent. */
const server: Wire = (path, init) => {
  if (path === '/api/me') return json({ me: ann });
  if (path.startsWith('/api/feed')) return json(feedAnswer([], 0));
  if (path === '/api/sign-out') return json({ done: true });
  if (path === '/api/sync') {
    const { items } = JSON.parse(String(init.body)) as { items: SyncItem[] };
    return json(syncAnswer(items.map(stored)));
  }
  return json({ me: ann, pin: '204611' });
};

let closePages: (() => void)[] = [];
/** A page of the browser, with every module anew over the browser's storage and locks. */
async function loadPage() {
  vi.resetModules();
  const { createPinia, disposePinia, setActivePinia } = await import('pinia');
  const pinia = createPinia();
  setActivePinia(pinia);
  closePages.push(() => disposePinia(pinia));
  const { useSession } = await import('@/stores/useSession');
  const { useSync } = await import('@/stores/useSync');
  const { useRuns } = await import('@/stores/useRuns');
  const stores = { session: useSession(), sync: useSync(), runs: useRuns() };
  await stores.session.ready;
  return stores;
}
const posts = (sent: SentRequest[]) => sent.filter(({ path }) => path === '/api/sync');

const closeAll = () => {
  for (const close of closePages) close();
  closePages = [];
};
beforeEach(() => {
  Object.defineProperty(navigator, 'locks', { value: locksOfOneBrowser(), configurable: true });
  const factory = new IDBFactory();
  vi.stubGlobal('indexedDB', factory);
  Dexie.dependencies.indexedDB = factory;
});
afterEach(() => {
  closeAll();
  vi.unstubAllGlobals();
});

it('a run goes out by itself as it is kept, and the words follow it', async () => {
  plugIn(server);
  const { session, sync, runs } = await loadPage();
  expect(sync.state).toBe('guest');
  await session.join({ code: 'K4R7MP', bench: 1, nickname: 'Bob 1' }, true);
  const row = await runs.addRun(rawRun());
  await eventually(() => expect(runs.entry(row.id)!.row.state).toBe('received'));
  await eventually(() => expect(sync.state).toBe('quiet'));
});

it('a run kept with no network is counted after a reload, and goes out when the network is back', async () => {
  plugIn(server);
  const first = await loadPage();
  await first.session.join({ code: 'K4R7MP', bench: 1, nickname: 'Bob 1' }, true);
  plugIn(offline);
  await first.runs.addRun(rawRun());
  closeAll();

  const { sync } = await loadPage();
  await eventually(() => expect(sync.state).toBe('unreachable'));
  expect(sync.waiting).toBe(1);

  const sent = plugIn(server);
  window.dispatchEvent(new Event('online'));
  await eventually(() => expect(sync.state).toBe('quiet'));
  expect(posts(sent)).toHaveLength(1);
});

it('with a run not taken it is not said that everything is in, until that one is', async () => {
  let takes = false;
  plugIn((path, init) => {
    if (path !== '/api/sync') return server(path, init);
    const { items } = JSON.parse(String(init.body)) as { items: SyncItem[] };
    return json(syncAnswer(items.map((item) => (takes ? stored(item) : turnedDown('refused', item)))));
  });
  const { session, sync, runs } = await loadPage();
  await session.join({ code: 'K4R7MP', bench: 1, nickname: 'Bob 1' }, true);
  const row = await runs.addRun(rawRun());
  await eventually(() => expect(sync.state).toBe('not_taken'));
  expect(sync.refused).toBe(1);
  takes = true;
  await sync.tryAgain('run', row.id);
  await eventually(() => expect(sync.state).toBe('quiet'));
});

it('nothing is said to be received before it was counted', async () => {
  plugIn(server);
  await (await loadPage()).session.join({ code: 'K4R7MP', bench: 1, nickname: 'Bob 1' }, true);
  plugIn(offline);
  const { sync } = await loadPage();
  expect(sync.state).toBe('starting');
});

it('R7: with the sign-in run out a run is kept, not sent, and goes out after coming back', async () => {
  plugIn(server);
  const first = await loadPage();
  await first.session.join({ code: 'K4R7MP', bench: 1, nickname: 'Bob 1' }, true);

  const sent = plugIn((path, init) => (path === '/api/me' ? json({ me: null }) : server(path, init)));
  const { session, sync, runs } = await loadPage();
  const row = await runs.addRun(rawRun());
  await eventually(() => expect(sync.state).toBe('signed_out'));
  expect(posts(sent)).toEqual([]);
  expect(runs.entry(row.id)!.row.state).toBe('waiting');

  plugIn((path, init) => (path === '/api/return' ? json({ me: ann }) : server(path, init)));
  await session.comeBack({ code: 'K4R7MP', bench: 1, nickname: 'Bob 1', pin: '204611' }, true);
  await eventually(() => expect(runs.entry(row.id)!.row.state).toBe('received'));
});
