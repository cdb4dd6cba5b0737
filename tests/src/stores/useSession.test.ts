import 'fake-indexeddb/auto';
import { IDBFactory } from 'fake-indexeddb';
import { Dexie } from 'dexie';
import { createPinia, setActivePinia } from 'pinia';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { rawRun, student } from '../support/samples';
import { json, page, plugIn, said, type Wire } from '../support/network';

const ann = student(1);
const ben = student(2);
const PIN = '204611';
const offline: Wire = () => Promise.reject(new TypeError('Failed to fetch'));

/** A page load: every module anew, over whatever the browser's storage holds. */
async function loadPage() {
  vi.resetModules();
  setActivePinia(createPinia());
  const { setActivePinia: activate, createPinia: make } = await import('pinia');
  activate(make());
  const { useSession } = await import('@/stores/useSession');
  const session = useSession();
  await session.ready;
  return session;
}
const keepRun = async (session: Awaited<ReturnType<typeof loadPage>>, run = rawRun()) => {
  const { addRun } = await import('@/db/runs');
  return addRun(session.store!, run, { class_id: null, bench: null });
};
const joinAs =
  (me: typeof ann): Wire =>
  (path) => {
    if (path === '/api/join') return json({ me, pin: PIN });
    if (path === '/api/sign-out') return json({ done: true });
    return json({ me });
  };
const place = { code: 'K4R7MP', bench: 1, nickname: 'Bob 1' };
const body = place;

beforeEach(() => {
  const factory = new IDBFactory();
  vi.stubGlobal('indexedDB', factory);
  Dexie.dependencies.indexedDB = factory;
});
afterEach(() => void vi.unstubAllGlobals());

describe('a sign-in', () => {
  it('survives a reload with no network', async () => {
    plugIn(joinAs(ann));
    expect((await (await loadPage()).join(body, true)).pin).toBe(PIN);

    plugIn(offline);
    const session = await loadPage();
    expect(session.me).toEqual(ann);
    expect(session.store!.name).toBe(`swaymark-student-${ann.id}`);
  });

  it.each([
    ['a portal page', () => page()],
    ['a server in trouble', () => said(500, 'trouble', 'Trouble.')],
  ])('is not ended by %s', async (_name, wire) => {
    plugIn(joinAs(ann));
    await (await loadPage()).join(body, true);
    plugIn(wire);
    const session = await loadPage();
    await session.askTheServer();
    expect(session.me).toEqual(ann);
    expect(session.standing).toBe('unknown');
  });

  it('R7: that ran out leaves the person and the store where they are', async () => {
    plugIn(joinAs(ann));
    await (await loadPage()).join(body, true);
    plugIn(() => json({ me: null }));
    const session = await loadPage();
    await session.askTheServer();
    expect(session.standing).toBe('expired');
    expect(session.me).toEqual(ann);
    await expect(session.isOwner(session.store!.owner)).rejects.toMatchObject({ kind: 'signed_out' });
  });

  it('the server knows better than the phone who this is', async () => {
    plugIn(joinAs(ann));
    await (await loadPage()).join(body, true);
    plugIn(joinAs(ben));
    const session = await loadPage();
    await session.askTheServer();
    expect(session.me).toEqual(ben);
    expect(session.store!.name).toBe(`swaymark-student-${ben.id}`);
  });

  it('that was turned down changes nothing and gives the server’s words', async () => {
    plugIn((path) =>
      path === '/api/join' ? said(409, 'name_taken', 'Bench 1 has a Bob 1 already.') : json({ me: null }),
    );
    const session = await loadPage();
    await expect(session.join(body, true)).rejects.toMatchObject({ message: 'Bench 1 has a Bob 1 already.' });
    expect(session.me).toBeNull();
  });
});

describe('R8: a shared phone', () => {
  it('keeps A’s waiting runs through A’s sign-out and B’s joining, and gives them back to A', async () => {
    plugIn(joinAs(ann));
    const session = await loadPage();
    await session.join(body, true);
    const row = await keepRun(session);
    await session.signOut();
    expect(session.me).toBeNull();

    plugIn(joinAs(ben));
    await session.join({ ...body, bench: 2 }, true);
    expect(await session.store!.runs.count()).toBe(0);
    await session.signOut();

    plugIn((path) => (path === '/api/return' ? json({ me: ann }) : joinAs(ann)(path, {})));
    await session.comeBack({ ...place, pin: PIN }, true);
    expect(await session.store!.runs.toArray()).toMatchObject([{ id: row.id, state: 'waiting' }]);
  });

  it('a store is sent from only by its owner, as the server knows this browser', async () => {
    plugIn(joinAs(ann));
    const session = await loadPage();
    await session.join(body, true);
    expect(await session.isOwner(`student-${ann.id}`)).toBe(true);
    expect(await session.isOwner(`student-${ben.id}`)).toBe(false);

    plugIn(joinAs(ben));
    expect(await (await loadPage()).isOwner(`student-${ann.id}`)).toBe(false);
  });

  it('a sign-out with no network holds, and is told to the server first of all', async () => {
    plugIn(joinAs(ann));
    const session = await loadPage();
    await session.join(body, true);
    plugIn(offline);
    await session.signOut();
    expect(session.me).toBeNull();

    const sent = plugIn((path) => (path === '/api/sign-out' ? json({ done: true }) : json({ me: null })));
    const again = await loadPage();
    await again.askTheServer();
    expect(again.me).toBeNull();
    expect(sent[0]!.path).toBe('/api/sign-out');
  });

  it('runs timed before joining stay behind when they are somebody else’s', async () => {
    plugIn((path) => (path === '/api/join' ? json({ me: ann, pin: PIN }) : json({ me: null })));
    const session = await loadPage();
    await keepRun(session);
    await session.join(body, false);
    expect(await session.store!.runs.count()).toBe(0);
    expect(await session.countGuestRuns()).toBe(1);
  });

  it('runs timed before joining come along when they are claimed', async () => {
    plugIn((path) => (path === '/api/join' ? json({ me: ann, pin: PIN }) : json({ me: null })));
    const session = await loadPage();
    const row = await keepRun(session);
    await session.join(body, true);
    expect(await session.store!.runs.toArray()).toMatchObject([{ id: row.id, state: 'waiting', bench: 1 }]);
  });
});
