import { freshStore } from '../support/freshStorage';
import { describe, expect, it } from 'vitest';
import { applyFeed, feedCursor, noteEpoch } from '@/db/feed';
import type { LocalStore } from '@/db/localStore';
import { applyVerdicts, outbox, parkEditsOfRefusedRuns, sendOnceMore } from '@/db/outbox';
import { addEdit, addRun } from '@/db/runs';
import { canonicalText, digestOf } from '@shared/schemas/canonical';
import type { RawRun } from '@shared/schemas/run';
import type { FeedItem } from '@shared/schemas/sync';
import { EPOCH, feedPage, feedRun, OTHER_EPOCH, rawEdit, rawRun, stored, turnedDown } from '../support/samples';

type RunItem = Extract<FeedItem, { type: 'run' }>;
const NOWHERE = { class_id: null, bench: null };
const everything = async (store: LocalStore) => ({
  runs: await store.runs.toArray(),
  edits: await store.edits.toArray(),
  meta: await store.meta.toArray(),
});

describe('applyFeed', () => {
  it('applied twice leaves the store as once', async () => {
    const store = freshStore();
    const answer = feedPage([feedRun(rawRun()), feedRun(rawRun())], 12);
    await applyFeed(store, answer);
    const once = await everything(store);
    await applyFeed(store, answer);
    expect(await everything(store)).toEqual(once);
    expect(await feedCursor(store)).toBe(12);
  });

  it.each([
    ['is not what its digest says', (item: RunItem) => ({ ...item, raw: item.raw.replace('40120000', '40120001') })],
    ['is not whole', (item: RunItem) => ({ ...item, raw: '{', digest: digestOf('{') })],
    ['is nothing', (item: RunItem) => ({ ...item, raw: 'null', digest: digestOf('null') })],
    ['is another run’s', (item: RunItem) => ({ ...item, id: rawRun().id })],
  ])('an item whose text %s is passed over, and the rest and the cursor are kept', async (_why, spoil) => {
    const store = freshStore();
    const good = feedRun(rawRun());
    await applyFeed(store, feedPage([spoil(feedRun(rawRun())), good], 9));
    expect(await store.runs.toCollection().primaryKeys()).toEqual([good.id]);
    expect(await feedCursor(store)).toBe(9);
  });

  it('an item under the id and digest of a run kept here brings no other text', async () => {
    const store = freshStore();
    const row = await addRun(store, rawRun(), NOWHERE);
    const other = canonicalText({ ...rawRun({ note: 'other' }), id: row.id });
    const item = { ...feedRun(rawRun()), id: row.id, digest: row.digest };
    await applyFeed(store, feedPage([{ ...item, raw: other }], 3));
    expect(await store.runs.get(row.id)).toEqual(row);
  });

  it('a run in a format of later is kept as it is, for a page that can read it', async () => {
    const store = freshStore();
    const later = feedRun({ ...rawRun(), version: 2, made: undefined } as unknown as RawRun);
    await applyFeed(store, feedPage([later], 3));
    expect(await store.runs.get(later.id)).toMatchObject({
      raw: later.raw,
      made_wall_ms: later.receipt.received_wall_ms,
    });
  });

  it('a run made here comes back with author and receipt and stays one made here', async () => {
    const store = freshStore();
    const run = rawRun();
    const row = await addRun(store, run, NOWHERE);
    await applyFeed(store, feedPage([feedRun(run)], 3));
    expect(await store.runs.get(run.id)).toMatchObject({
      origin: 'mine',
      state: 'received',
      created_seq: row.created_seq,
      bench: 3,
      author: { name: 'Bob 3' },
      receipt: { code: 'K7QM' },
    });
  });

  it('another text under a known id does not touch the one kept here', async () => {
    const store = freshStore();
    const run = rawRun();
    const row = await addRun(store, run, NOWHERE);
    await applyFeed(store, feedPage([feedRun({ ...run, note: 'other' })], 3));
    expect(await store.runs.get(run.id)).toEqual(row);
  });
});

describe('what a version of the app does not understand', () => {
  const old = (not_understood: number[]) => ({ reader: 'the version before', not_understood });

  it('sets the cursor back to the first of it at the first page another version reads, once', async () => {
    const store = freshStore();
    await applyFeed(store, feedPage([], 20, old([14, 17])));
    await applyFeed(store, feedPage([], 30, old([25])));
    expect(await feedCursor(store)).toBe(30);
    await applyFeed(store, feedPage([], 31));
    expect(await feedCursor(store)).toBe(13);
    await applyFeed(store, feedPage([feedRun(rawRun())], 31));
    await applyFeed(store, feedPage([], 32));
    expect(await feedCursor(store)).toBe(32);
  });

  it('is forgotten with the server’s old epoch, as the feed starts over anyway', async () => {
    const store = freshStore();
    await applyFeed(store, feedPage([], 20, old([14])));
    await applyFeed(store, feedPage([], 30, { server_epoch: OTHER_EPOCH }));
    await applyFeed(store, feedPage([], 30, { server_epoch: OTHER_EPOCH }));
    expect(await feedCursor(store)).toBe(30);
  });
});

describe('a new epoch of the server', () => {
  it('puts what was received from here back in the queue and starts the feed over', async () => {
    const store = freshStore();
    const row = await addRun(store, rawRun(), NOWHERE);
    await applyFeed(store, feedPage([feedRun(rawRun())], 30));
    await applyVerdicts(store, [stored({ type: 'run', id: row.id, digest: row.digest })]);

    expect(await noteEpoch(store, OTHER_EPOCH)).toBe(true);
    expect((await outbox(store, new Set(), 50)).map(({ id }) => id)).toEqual([row.id]);
    expect(await feedCursor(store)).toBe(0);
    expect(await noteEpoch(store, OTHER_EPOCH)).toBe(false);
  });

  it('is not seen in the first answer ever', async () => {
    const store = freshStore();
    expect(await noteEpoch(store, EPOCH)).toBe(false);
  });
});

describe('keeping runs and edits', () => {
  it('the same run kept twice is one run', async () => {
    const store = freshStore();
    const run = rawRun();
    const first = await addRun(store, run, NOWHERE);
    expect(await addRun(store, run, NOWHERE)).toEqual(first);
    expect(await store.runs.count()).toBe(1);
  });

  it('R2: another text under a kept id is turned down and the first stays', async () => {
    const store = freshStore();
    const run = rawRun();
    const first = await addRun(store, run, NOWHERE);
    await expect(addRun(store, { ...run, note: 'other' }, NOWHERE)).rejects.toThrow(/another text/);
    expect(await store.runs.get(run.id)).toEqual(first);
  });

  it('edits of one run are numbered in the order they were made, even at once', async () => {
    const store = freshStore();
    const { id } = rawRun();
    await Promise.all([1, 2, 3].map((n) => addEdit(store, rawEdit(id, { kind: 'set_swings', swings: 20 + n }))));
    const seqs = (await store.edits.toArray()).map((row) => (JSON.parse(row.raw) as { made_seq: number }).made_seq);
    expect(seqs.sort()).toEqual([1, 2, 3]);
  });

  it('a refused run goes back in the queue together with its edits, from either', async () => {
    for (const way of ['run', 'edit'] as const) {
      const store = freshStore();
      const run = await addRun(store, rawRun(), NOWHERE);
      const edit = await addEdit(store, rawEdit(run.id, { kind: 'set_swings', swings: 21 }));
      await applyVerdicts(store, [turnedDown('refused', { type: 'run', id: run.id, digest: run.digest })]);
      await parkEditsOfRefusedRuns(store);
      expect(await outbox(store, new Set(), 50)).toEqual([]);
      await sendOnceMore(store, way, { run, edit }[way].id);
      expect((await outbox(store, new Set(), 50)).map(({ id }) => id)).toEqual([run.id, edit.id]);
    }
  });

  it('a refused run goes back in the queue by hand, a received one never', async () => {
    const store = freshStore();
    const refused = await addRun(store, rawRun(), NOWHERE);
    const received = await addRun(store, rawRun(), NOWHERE);
    await applyVerdicts(store, [
      turnedDown('refused', { type: 'run', id: refused.id, digest: refused.digest }),
      stored({ type: 'run', id: received.id, digest: received.digest }),
    ]);
    await sendOnceMore(store, 'run', refused.id);
    await sendOnceMore(store, 'run', received.id);
    expect((await outbox(store, new Set(), 50)).map(({ id }) => id)).toEqual([refused.id]);
  });
});
