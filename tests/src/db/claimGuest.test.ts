import 'fake-indexeddb/auto';
import { IDBFactory } from 'fake-indexeddb';
import { Dexie } from 'dexie';
import { beforeEach, expect, it } from 'vitest';
import { claimGuest, countGuestRuns } from '@/db/claimGuest';
import { LocalStore, ownerKey } from '@/db/localStore';
import { outbox } from '@/db/outbox';
import { addEdit, addRun } from '@/db/runs';
import { CLASS_ID, rawEdit, rawRun, student } from '../support/samples';

const NOWHERE = { class_id: null, bench: null };
const ann = student(1);
const ben = student(2);
beforeEach(() => {
  Dexie.dependencies.indexedDB = new IDBFactory();
});

const guestWithRuns = async () => {
  const guest = new LocalStore('guest');
  const run = await addRun(guest, rawRun(), NOWHERE);
  const edit = await addEdit(guest, rawEdit(run.id, { kind: 'set_swings', swings: 21 }));
  const later = await addRun(guest, rawRun(), NOWHERE);
  guest.close();
  return [run, edit, later];
};

it('runs timed before joining move into the account, in order, byte for byte, and wait to be sent', async () => {
  const made = await guestWithRuns();
  const store = new LocalStore(ownerKey(ann));
  expect(await claimGuest(store, ann, true)).toBe(2);
  const waiting = await outbox(store, new Set(), 50);
  expect(waiting.map(({ id, raw, digest }) => ({ id, raw, digest }))).toEqual(
    made.map(({ id, raw, digest }) => ({ id, raw, digest })),
  );
  expect(await store.runs.get(made[0]!.id)).toMatchObject({ class_id: CLASS_ID, bench: 1 });
  expect(await countGuestRuns()).toBe(0);
});

it('a claim cut off before the guest let go is finished by the next, with no double', async () => {
  const made = await guestWithRuns();
  const store = new LocalStore(ownerKey(ann));
  const guest = new LocalStore('guest');
  const [runs, edits] = [await guest.runs.toArray(), await guest.edits.toArray()];
  await claimGuest(store, ann, true);
  await guest.runs.bulkAdd(runs);
  await guest.edits.bulkAdd(edits);
  guest.close();

  await claimGuest(store, ann, true);
  expect((await outbox(store, new Set(), 50)).map(({ id }) => id)).toEqual(made.map(({ id }) => id));
  expect(await countGuestRuns()).toBe(0);
});

it('what one account began to move is left alone by the next, and its edits made meanwhile with it', async () => {
  const made = await guestWithRuns();
  const guest = new LocalStore('guest');
  const [runs, edits] = [await guest.runs.toArray(), await guest.edits.toArray()];
  const [store, other] = [new LocalStore(ownerKey(ann)), new LocalStore(ownerKey(ben))];
  await guest.meta.put({
    key: 'claims',
    content: Object.fromEntries([...runs, ...edits].map(({ id }) => [id, store.owner])),
  });
  const later = await addEdit(guest, rawEdit(made[0]!.id, { kind: 'set_swings', swings: 22 }));
  const free = await addRun(guest, rawRun(), NOWHERE);
  guest.close();
  expect(await countGuestRuns()).toBe(1);

  expect(await claimGuest(other, ben, true)).toBe(1);
  expect((await outbox(other, new Set(), 50)).map(({ id }) => id)).toEqual([free.id]);
  expect(await claimGuest(store, ann, true, 'begun')).toBe(2);
  expect((await outbox(store, new Set(), 50)).map(({ id }) => id)).toEqual([...made, later].map(({ id }) => id));
});

it('a cut-short recording comes along with its events, unless one is being timed', async () => {
  const guest = new LocalStore('guest');
  await guest.recordings.add({
    id: 'r1',
    state: 'open',
    plan: { swings_per_mark: 1, planned_swings: null, rig: null, amplitudes: [] },
    started_wall_ms: 1,
    zone_offset_min: 0,
    clock_step_us: 100,
    isolated: false,
  });
  await guest.recordingEvents.add({ recording_id: 'r1', seq: 1, at_ms: 5, wall_ms: 6, kind: 'mark', input: 'touch' });
  guest.close();

  const store = new LocalStore(ownerKey(ann));
  await claimGuest(store, ann, false);
  expect(await store.recordings.count()).toBe(0);
  await claimGuest(store, ann, true);
  expect(await store.recordings.get('r1')).toMatchObject({ state: 'open' });
  expect(await store.recordingEvents.count()).toBe(1);
  expect(await countGuestRuns()).toBe(0);
});

it('R8: two accounts on one phone never see or send each other’s runs', async () => {
  const ofAnn = new LocalStore(ownerKey(ann));
  const ofBen = new LocalStore(ownerKey(ben));
  const run = await addRun(ofAnn, rawRun(), NOWHERE);
  expect(await ofBen.runs.get(run.id)).toBeUndefined();
  expect(await outbox(ofBen, new Set(), 50)).toEqual([]);
  await expect(claimGuest(ofBen, ann, true)).rejects.toThrow();
});
