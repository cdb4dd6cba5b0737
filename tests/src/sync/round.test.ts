import { freshStore } from '../support/freshStorage';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { fetchFeed, sendBatch } from '@/api/sync';
import type { LocalStore } from '@/db/localStore';
import { addEdit, addRun } from '@/db/runs';
import { syncRound } from '@/sync/round';
import type { SyncItem } from '@shared/schemas/sync';
import { json, page, plugIn, said, type Wire } from '../support/network';
import {
  DEVICE,
  EPOCH,
  feedAnswer,
  feedRun,
  OTHER_EPOCH,
  rawEdit,
  rawRun,
  stored,
  syncAnswer,
  turnedDown,
} from '../support/samples';

const NOWHERE = { class_id: null, bench: null };
const itemsOf = (init: RequestInit) => (JSON.parse(String(init.body)) as { items: SyncItem[] }).items;
/** A server that answers /sync as told, and has nothing new. */
const answering =
  (sync: Wire): Wire =>
  (path, init) =>
    path.startsWith('/api/sync') ? sync(path, init) : json(feedAnswer([], 0));
const takesAll: Wire = (_path, init) => json(syncAnswer(itemsOf(init).map(stored)));

let store: LocalStore;
beforeEach(() => {
  store = freshStore();
});
afterEach(() => {
  vi.unstubAllGlobals();
  vi.useRealTimers();
});

const round = (isOwner = () => Promise.resolve(true)) =>
  syncRound({
    store,
    deviceId: DEVICE,
    api: { sendBatch, fetchFeed },
    wallNow: () => 1_750_000_300_000,
    isOwner,
    onSending: () => undefined,
  });
const states = async () => (await store.runs.orderBy('created_seq').toArray()).map((row) => row.state);

describe('R6: only a receipt with matching id and digest clears an item', () => {
  const answers: [string, Wire, string][] = [
    ['200 with a portal page', () => page(200), 'cannot_reach'],
    ['200 with JSON of another service', () => json({ ok: true }), 'cannot_reach'],
    ['204', () => new Response(null, { status: 204 }), 'cannot_reach'],
    [
      '301',
      () => new Response(null, { status: 301, headers: { Location: 'https://portal.example/' } }),
      'cannot_reach',
    ],
    ['401 of our server', () => said(401, 'signed_out', 'Sign in again.'), 'signed_out'],
    ['401 of a portal', () => page(401), 'cannot_reach'],
    ['403', () => said(403, 'not_allowed', 'Not yours to send.'), 'cannot_reach'],
    ['404', () => said(404, 'not_found', 'Nothing here.'), 'cannot_reach'],
    ['409', () => said(409, 'conflict', 'Busy with another.'), 'cannot_reach'],
    ['413 of a proxy', () => page(413), 'later'],
    ['422 about the envelope', () => said(422, 'bad_request', 'Clock missing.', 'sent_wall_ms'), 'cannot_reach'],
    ['429', () => said(429, 'too_many', 'Wait a minute.'), 'cannot_reach'],
    ['500', () => said(500, 'trouble', 'Trouble.'), 'cannot_reach'],
    ['502 of a proxy', () => page(502), 'cannot_reach'],
    [
      'truncated JSON',
      () =>
        new Response('{"server_epoch":"018f0000-0000-70', {
          status: 200,
          headers: { 'Content-Type': 'application/json' },
        }),
      'cannot_reach',
    ],
    ['a broken connection', () => Promise.reject(new TypeError('Failed to fetch')), 'cannot_reach'],
    [
      'a receipt with another digest',
      (_path, init) => json(syncAnswer(itemsOf(init).map((item) => stored({ ...item, digest: 'f'.repeat(64) })))),
      'later',
    ],
    [
      'a receipt with another id',
      (_path, init) =>
        json(syncAnswer(itemsOf(init).map((item) => stored({ ...item, id: '018f0000-0000-7000-8000-00000000ffff' })))),
      'later',
    ],
    ['a receipt for none of the items', () => json(syncAnswer([])), 'later'],
  ];

  it.each(answers)('%s leaves the run waiting', async (_name, sync, outcome) => {
    await addRun(store, rawRun(), NOWHERE);
    plugIn(answering(sync));
    expect((await round()).kind).toBe(outcome);
    expect(await states()).toEqual(['waiting']);
  });

  it('no answer in time leaves the run waiting', async () => {
    await addRun(store, rawRun(), NOWHERE);
    vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout'] });
    plugIn(
      answering(
        (_path, init) =>
          new Promise((_resolve, reject) => {
            init.signal!.addEventListener('abort', () => reject(new DOMException('aborted', 'AbortError')));
            queueMicrotask(() => void vi.advanceTimersByTimeAsync(30_000));
          }),
      ),
    );
    const outcome = await round();
    expect(outcome).toMatchObject({ kind: 'cannot_reach', error: { kind: 'timeout' } });
    expect(await states()).toEqual(['waiting']);
  });

  it('a receipt counts beside an analysis, a verdict and fields of a newer server', async () => {
    const row = await addRun(store, rawRun(), NOWHERE);
    plugIn(
      answering((_path, init) => {
        const verdicts = itemsOf(init).map((item) => ({ ...stored(item), shelf: 4 }));
        const newer = { ...syncAnswer([]), analyses: [{ method: 'bayes-1' }], motd: 'hello' };
        return json({ ...newer, verdicts: [{ verdict: 'postponed' }, ...verdicts] });
      }),
    );
    await round();
    expect(await store.runs.get(row.id)).toMatchObject({ state: 'received', receipt: { code: 'K7QM' } });
  });

  it('a receipt with id and digest marks the run received and keeps its code', async () => {
    const row = await addRun(store, rawRun(), NOWHERE);
    plugIn(answering(takesAll));
    await round();
    expect(await store.runs.get(row.id)).toMatchObject({ state: 'received', receipt: { code: 'K7QM' } });
  });
});

describe('what is sent', () => {
  it('the bytes sent are the bytes sealed', async () => {
    const row = await addRun(store, rawRun({ note: 'naïve "quotes" \u2028' }), NOWHERE);
    const sent = plugIn(answering(takesAll));
    await round();
    expect(sent[0]!.body).toMatchObject({
      protocol: 1,
      device_id: DEVICE,
      items: [{ raw: row.raw, digest: row.digest }],
    });
    expect(sent[0]!.headers.get('X-Swaymark')).toBe('1');
  });

  it('one more run costs two requests, nothing new costs one', async () => {
    await addRun(store, rawRun(), NOWHERE);
    const sent = plugIn(answering(takesAll));
    await round();
    expect(sent.map(({ path }) => path.split('?')[0])).toEqual(['/api/sync', '/api/feed']);
    sent.length = 0;
    await round();
    expect(sent.map(({ path }) => path.split('?')[0])).toEqual(['/api/feed']);
  });

  it('runs go in the order they were made, an edit after its run', async () => {
    const first = await addRun(store, rawRun(), NOWHERE);
    const edit = await addEdit(store, rawEdit(first.id, { kind: 'set_swings', swings: 21 }));
    const second = await addRun(store, rawRun(), NOWHERE);
    const sent = plugIn(answering(takesAll));
    await round();
    expect((sent[0]!.body as { items: SyncItem[] }).items.map(({ id }) => id)).toEqual([first.id, edit.id, second.id]);
  });

  it('R9: a run sealed while a batch is on its way is sent without another trigger', async () => {
    await addRun(store, rawRun(), NOWHERE);
    let late: string | undefined;
    plugIn(
      answering(async (path, init) => {
        late ??= (await addRun(store, rawRun(), NOWHERE)).id;
        return takesAll(path, init);
      }),
    );
    expect(await round()).toMatchObject({ kind: 'done', sent: 2 });
    expect((await store.runs.get(late!))!.state).toBe('received');
  });
});

describe('R5: one bad item does not block', () => {
  it('a refused item is set aside with its reason and the others are received', async () => {
    const rows = [];
    for (let i = 0; i < 3; i++) rows.push(await addRun(store, rawRun(), NOWHERE));
    const bad = rows[1]!.id;
    plugIn(
      answering((_path, init) =>
        json(syncAnswer(itemsOf(init).map((item) => (item.id === bad ? turnedDown('refused', item) : stored(item))))),
      ),
    );
    expect((await round()).kind).toBe('done');
    expect(await states()).toEqual(['received', 'refused', 'received']);
    expect((await store.runs.get(bad))!.refusal).toEqual({
      code: 'not_yours',
      message: 'This run belongs to another bench.',
    });
  });

  it('edits of a refused run are set aside with its reason, those made afterwards too', async () => {
    const run = await addRun(store, rawRun(), NOWHERE);
    const edits = [await addEdit(store, rawEdit(run.id, { kind: 'set_swings', swings: 21 }))];
    plugIn(
      answering((_path, init) =>
        json(syncAnswer(itemsOf(init).map((item) => turnedDown(item.type === 'run' ? 'refused' : 'later', item)))),
      ),
    );
    expect((await round()).kind).toBe('done');
    edits.push(await addEdit(store, rawEdit(run.id, { kind: 'note', text: 'windy' })));
    expect((await round()).kind).toBe('done');
    for (const { id } of edits)
      expect(await store.edits.get(id)).toMatchObject({ state: 'refused', refusal: { code: 'not_yours' } });
  });

  it('an item to be tried later waits and does not keep the round going', async () => {
    await addRun(store, rawRun(), NOWHERE);
    const sent = plugIn(answering((_path, init) => json(syncAnswer(itemsOf(init).map((i) => turnedDown('later', i))))));
    expect((await round()).kind).toBe('later');
    expect(sent.filter(({ path }) => path === '/api/sync')).toHaveLength(1);
    expect(await states()).toEqual(['waiting']);
  });

  it('R2: a conflict keeps the phone’s text as it was', async () => {
    const row = await addRun(store, rawRun(), NOWHERE);
    plugIn(answering((_path, init) => json(syncAnswer(itemsOf(init).map((i) => turnedDown('conflict', i))))));
    await round();
    expect(await store.runs.get(row.id)).toMatchObject({
      state: 'refused',
      refusal: { code: 'conflict' },
      raw: row.raw,
    });
  });

  it('R20: 413 halves the batch until only what is too big is left over', async () => {
    const rows = [];
    for (let i = 0; i < 8; i++) rows.push(await addRun(store, rawRun(), NOWHERE));
    const big = rows[5]!.id;
    const sizes: number[] = [];
    plugIn(
      answering((path, init) => {
        const items = itemsOf(init);
        sizes.push(items.length);
        return items.some(({ id }) => id === big)
          ? said(413, 'too_large', 'This is over the limit of one request.')
          : takesAll(path, init);
      }),
    );
    await round();
    expect(sizes).toEqual([8, 4, 4, 2, 1, 1, 2]);
    expect(await states()).toEqual(rows.map(({ id }) => (id === big ? 'refused' : 'received')));
  });

  it('an item whose text the server cannot read is found by halving', async () => {
    const rows = [await addRun(store, rawRun(), NOWHERE), await addRun(store, rawRun(), NOWHERE)];
    plugIn(
      answering((path, init) =>
        itemsOf(init).some(({ id }) => id === rows[0]!.id)
          ? said(422, 'bad_request', 'The text is too long.', 'items.0.raw')
          : takesAll(path, init),
      ),
    );
    await round();
    expect(await states()).toEqual(['refused', 'received']);
  });
});

describe('R12: a server put back from an older backup', () => {
  it('is sent everything again, and read from the start', async () => {
    const rows = [await addRun(store, rawRun(), NOWHERE), await addRun(store, rawRun(), NOWHERE)];
    plugIn((path, init) => (path.startsWith('/api/sync') ? takesAll(path, init) : json(feedAnswer([], 41))));
    await round();
    expect(await states()).toEqual(['received', 'received']);

    const sent = plugIn((path, init) =>
      path.startsWith('/api/sync')
        ? json(syncAnswer(itemsOf(init).map(stored), OTHER_EPOCH))
        : json(feedAnswer([], 7, { server_epoch: OTHER_EPOCH })),
    );
    expect(await round()).toMatchObject({ kind: 'done', sent: 2 });
    expect(sent.map(({ path }) => path)).toEqual([
      '/api/feed?after=41&limit=200',
      '/api/feed?after=0&limit=200',
      '/api/sync',
      '/api/feed?after=7&limit=200',
    ]);
    expect((sent[2]!.body as { items: SyncItem[] }).items.map(({ id }) => id)).toEqual(rows.map(({ id }) => id));
  });
});

describe('the feed', () => {
  it('is read to its end', async () => {
    const runs = [feedRun(rawRun()), feedRun(rawRun())];
    const sent = plugIn((path) =>
      json(path.includes('after=0') ? feedAnswer([runs[0]!], 1, { more: true }) : feedAnswer([runs[1]!], 2)),
    );
    await round();
    expect(sent).toHaveLength(2);
    expect(await store.runs.count()).toBe(2);
  });

  it('passes over an item of a kind it does not know, and keeps the rest and the cursor', async () => {
    const item = { ...feedRun(rawRun()), colour: 'brass' };
    plugIn(() => json({ ...feedAnswer([], 8), items: [{ type: 'song', seq: 7 }, item] }));
    await round();
    expect(await store.runs.count()).toBe(1);
    expect(await store.meta.get('cursor')).toMatchObject({ content: 8 });
  });

  it('is read again from where an item was not understood, after the app was updated', async () => {
    const item = { ...feedRun(rawRun()), seq: 5, colour: 'brass' };
    plugIn(() => json({ ...feedAnswer([], 8), items: [item, { type: 'song', seq: 7 }] }));
    await round();
    const kept = (await store.meta.get('not_understood'))!.content as object;
    expect(kept).toMatchObject({ before: 4 });
    await store.meta.put({ key: 'not_understood', content: { ...kept, reader: 'the version before' } });
    const sent = plugIn(() => json(feedAnswer([], 9)));
    await round();
    await round();
    expect(sent.map(({ path }) => path)).toEqual([
      '/api/feed?after=8&limit=200',
      '/api/feed?after=4&limit=200',
      '/api/feed?after=9&limit=200',
    ]);
  });

  it('expects more while a run handed in has no analysis from the server', async () => {
    await addRun(store, rawRun(), NOWHERE);
    plugIn(answering(takesAll));
    expect(await round()).toMatchObject({ kind: 'done', expectsMore: true });
  });
});

describe('R8: whose store it is', () => {
  it('nothing leaves a store while another account is signed in', async () => {
    await addRun(store, rawRun(), NOWHERE);
    const sent = plugIn(answering(takesAll));
    expect((await round(() => Promise.resolve(false))).kind).toBe('not_owner');
    expect(sent).toEqual([]);
    expect(await states()).toEqual(['waiting']);
  });

  it('R7: after a 401 everything still waits, and goes out once signed in again', async () => {
    await addRun(store, rawRun(), NOWHERE);
    plugIn(answering(() => said(401, 'signed_out', 'Sign in again.')));
    expect((await round()).kind).toBe('signed_out');
    plugIn(answering(takesAll));
    expect(await round()).toMatchObject({ kind: 'done', sent: 1 });
    expect(await store.meta.get('server_epoch')).toMatchObject({ content: EPOCH });
  });
});
