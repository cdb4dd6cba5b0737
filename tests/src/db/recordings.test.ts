import 'fake-indexeddb/auto';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { closeStore, LocalStore } from '@/db/localStore';
import {
  bringBackRecording,
  discardRecording,
  openRecordings,
  rewriteMissing,
  sealRecording,
  writeEvent,
} from '@/db/recordings';
import { digestOf } from '@shared/schemas/canonical';
import { sealTapRun } from '@shared/timing/sealTapRun';
import type { TapRecording } from '@shared/timing/tapRecording';
import { pad, tapEvents, tapRecording } from '../../factories/tapRecording';

const maker = { app_version: '0.1.0', device_id: '01900000-0000-7000-8000-0000000000aa', cautions_seen_wall_ms: null };
const place = { class_id: null, bench: null };

let stores: LocalStore[] = [];
let owner: string;

beforeEach(() => {
  owner = `student-${crypto.randomUUID()}`;
});
afterEach(() => {
  stores.forEach(closeStore);
  stores = [];
});

function open(as = owner): LocalStore {
  const store = new LocalStore(as);
  stores.push(store);
  return store;
}

const run = (swings: number): TapRecording =>
  tapRecording({
    id: crypto.randomUUID(),
    events: tapEvents(Array.from({ length: swings + 1 }, (_, n) => pad.mark(n * 2006.1))),
  });

async function writeFirst(store: LocalStore, recording: TapRecording, rows: number) {
  for (const event of recording.events.slice(0, rows)) await writeEvent(store, recording, event);
}

describe('recordings', () => {
  it.each([1, 2, 7, 21])('gives back every mark written before a crash at row %i', async (rows) => {
    const recording = run(20);
    const before = open();
    await writeFirst(before, recording, rows);
    closeStore(before);

    const [found] = await openRecordings(open());
    expect(found).toMatchObject({ id: recording.id, plan: recording.plan, clock_step_us: 100 });
    expect(found!.events).toMatchObject(recording.events.slice(0, rows));
  });

  it('seals what was found after a crash into the same run memory would have made', async () => {
    const recording = run(14);
    const before = open();
    await writeFirst(before, recording, 15);
    closeStore(before);
    const [found] = await openRecordings(open());
    expect(sealTapRun(found!, 'cut_short', maker)).toEqual(sealTapRun(recording, 'cut_short', maker));
  });

  it('refuses a second row with a number that is taken', async () => {
    const [recording, store] = [run(3), open()];
    await writeFirst(store, recording, 2);
    await expect(writeEvent(store, recording, recording.events[1]!)).rejects.toThrow();
    expect(await store.recordingEvents.count()).toBe(2);
  });

  it('writes again what storage lost in the middle of a run, and says how much', async () => {
    const [recording, store] = [run(20), open()];
    await writeFirst(store, recording, 12);
    await Promise.all([store.recordings.clear(), store.recordingEvents.clear()]);
    for (const event of recording.events.slice(12)) await writeEvent(store, recording, event);

    expect(await rewriteMissing(store, recording)).toBe(12);
    const [found] = await openRecordings(store);
    expect(found!.events).toMatchObject(recording.events);
  });

  it('writes again everything when the whole database was deleted under it', async () => {
    const [recording, store] = [run(5), open()];
    await writeFirst(store, recording, 6);
    await store.delete();
    await store.open();
    expect(await rewriteMissing(store, recording)).toBe(6);
    expect(await openRecordings(store)).toHaveLength(1);
  });

  it('has nothing to write again when all is there', async () => {
    const [recording, store] = [run(5), open()];
    await writeFirst(store, recording, 6);
    expect(await rewriteMissing(store, recording)).toBe(0);
  });
});

describe('sealRecording', () => {
  it('keeps the run waiting to be sent, with the digest of its text, and closes the recording', async () => {
    const [recording, store] = [run(5), open()];
    await writeFirst(store, recording, 6);
    await sealRecording(store, sealTapRun(recording, 'held', maker)!, { class_id: null, bench: 7 });

    const row = (await store.runs.get(recording.id))!;
    expect(row).toMatchObject({ state: 'waiting', bench: 7, origin: 'mine' });
    expect(digestOf(row.raw)).toBe(row.digest);
    expect(await openRecordings(store)).toEqual([]);
  });

  it('leaves the recording open when the run cannot be kept', async () => {
    const [recording, store] = [run(5), open()];
    await writeFirst(store, recording, 6);
    const raw = sealTapRun(recording, 'held', maker)!;
    await sealRecording(store, raw, place);
    await store.recordings.update(recording.id, { state: 'open' });
    await expect(sealRecording(store, { ...raw, note: 'another text' }, place)).rejects.toThrow();
    expect(await openRecordings(store)).toHaveLength(1);
    expect((await store.runs.toArray()).map((row) => row.raw)).toHaveLength(1);
  });

  it('is harmless a second time', async () => {
    const [recording, store] = [run(5), open()];
    await writeFirst(store, recording, 6);
    const raw = sealTapRun(recording, 'held', maker)!;
    await sealRecording(store, raw, place);
    await sealRecording(store, raw, place);
    expect(await store.runs.count()).toBe(1);
  });
});

describe('cut-short recordings', () => {
  it('are no longer offered once discarded, and come back when asked', async () => {
    const [recording, store] = [run(5), open()];
    await writeFirst(store, recording, 6);
    await discardRecording(store, recording.id);
    expect(await openRecordings(store)).toEqual([]);
    await bringBackRecording(store, recording.id);
    expect(await openRecordings(store)).toHaveLength(1);
  });

  it('are only seen in the store of the account that timed them', async () => {
    await writeFirst(open(), run(5), 6);
    expect(await openRecordings(open(`student-${crypto.randomUUID()}`))).toEqual([]);
  });
});
