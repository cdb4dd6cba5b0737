import 'fake-indexeddb/auto';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { effectScope, type EffectScope } from 'vue';
import { GRACE_MS, useRecorder, type RecorderOptions } from '@/composables/useRecorder';
import { WRITE_DEADLINE_MS } from '@/composables/eventWriter';
import { closeStore, LocalStore } from '@/db/localStore';
import type { RawRun, TapCapture } from '@shared/schemas/run';
import { eventually } from '../../support/eventually';

let store: LocalStore;
let scope: EffectScope;
let clock: { mono: number; wall: number };

beforeEach(async () => {
  vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout'] });
  store = new LocalStore(`student-${crypto.randomUUID()}`);
  await store.open();
  scope = effectScope();
  clock = { mono: 20_000, wall: Date.UTC(2030, 2, 12, 9) };
});
afterEach(() => {
  scope.stop();
  closeStore(store);
  vi.useRealTimers();
});

function begin(plan: Partial<RecorderOptions['plan']> = {}, gloved = false) {
  return scope.run(() =>
    useRecorder({
      store,
      id: crypto.randomUUID(),
      plan: { swings_per_mark: 1, planned_swings: null, rig: null, amplitudes: [], ...plan },
      place: { class_id: null, bench: 3 },
      maker: { app_version: '0.1.0', device_id: crypto.randomUUID(), cautions_seen_wall_ms: null },
      clock: { step_us: 100, isolated: false },
      gloved: () => gloved,
      now: () => clock.mono,
      wall: () => clock.wall,
      nextFrame: (paint) => paint(),
    }),
  )!;
}

/** Moves both clocks on, as time does. */
function pass(ms: number) {
  clock.mono += ms;
  clock.wall += ms;
}

/** Taps every `lap` ms, the first at once. */
function tapTimes(recorder: ReturnType<typeof begin>, times: number, lap = 2000) {
  for (let i = 0; i < times; i += 1) {
    if (i > 0) pass(lap);
    recorder.tap(clock.mono, 'touch');
  }
}

async function sealed(): Promise<TapCapture> {
  vi.useRealTimers();
  await vi.waitUntil(async () => (await store.runs.count()) === 1);
  const run = JSON.parse((await store.runs.toArray())[0]!.raw) as RawRun;
  return run.capture as TapCapture;
}

describe('useRecorder', () => {
  it('says 0 at the first tap and counts on', () => {
    const recorder = begin({ planned_swings: 20 });
    expect(recorder.view.value).toMatchObject({ phase: 'armed', count: -1, swingsLeft: 20 });
    tapTimes(recorder, 1);
    expect(recorder.view.value).toMatchObject({ phase: 'running', count: 0, swingsLeft: 20 });
    pass(2000);
    tapTimes(recorder, 3);
    expect(recorder.view.value).toMatchObject({ count: 3, swingsLeft: 17 });
  });

  it('has each tap on disk without waiting for the end', async () => {
    const recorder = begin();
    tapTimes(recorder, 3);
    vi.useRealTimers();
    await vi.waitUntil(async () => (await store.recordingEvents.count()) === 3);
    expect((await store.recordingEvents.toArray()).map((row) => row.at_ms)).toEqual([20_000, 22_000, 24_000]);
    expect(await store.recordings.toArray()).toMatchObject([{ state: 'open' }]);
  });

  it('takes a second contact within 60 ms as a bounce, logs it, and takes one at 70 ms as a mark', async () => {
    const recorder = begin();
    tapTimes(recorder, 1);
    pass(59);
    expect(recorder.tap(clock.mono, 'touch')).toBe(false);
    pass(11);
    expect(recorder.tap(clock.mono, 'touch')).toBe(true);
    await recorder.finish();
    expect((await sealed()).rejected).toEqual([{ why: 'bounce', at_us: 59_000 }]);
  });

  it('widens the gate to 150 ms with gloves on', () => {
    const recorder = begin({}, true);
    tapTimes(recorder, 1);
    pass(140);
    expect(recorder.tap(clock.mono, 'touch')).toBe(false);
  });

  it('counts two swings a mark pair when every pass is tapped', () => {
    const recorder = begin({ swings_per_mark: 0.5, planned_swings: 10 });
    tapTimes(recorder, 5, 1000);
    expect(recorder.view.value).toMatchObject({ count: 4, swingsLeft: 8 });
  });

  it('stops by itself two seconds after the planned swing', async () => {
    const recorder = begin({ planned_swings: 3 });
    tapTimes(recorder, 4);
    expect(recorder.view.value.phase).toBe('grace');
    await vi.advanceTimersByTimeAsync(GRACE_MS - 1);
    expect(recorder.view.value.phase).toBe('grace');
    await vi.advanceTimersByTimeAsync(1);
    const capture = await sealed();
    expect(capture).toMatchObject({ ended: 'planned', planned_swings: 3 });
    expect(capture.mark_us).toHaveLength(4);
  });

  it('goes further when tapped in the grace time, and then only stops by hand', async () => {
    const recorder = begin({ planned_swings: 3 });
    tapTimes(recorder, 4);
    pass(1900);
    tapTimes(recorder, 2);
    expect(recorder.view.value.phase).toBe('running');
    await vi.advanceTimersByTimeAsync(10 * GRACE_MS);
    expect(recorder.view.value.phase).toBe('running');
    await recorder.finish();
    expect(await sealed()).toMatchObject({ ended: 'held' });
  });

  it('goes back below the planned count by undo, and stops by itself when it is reached again', () => {
    const recorder = begin({ planned_swings: 3 });
    tapTimes(recorder, 4);
    recorder.undo(clock.mono + 300);
    expect(recorder.view.value).toMatchObject({ phase: 'running', count: 2 });
    vi.advanceTimersByTime(10 * GRACE_MS);
    expect(recorder.view.value.phase).toBe('running');
    pass(2000);
    tapTimes(recorder, 1);
    expect(recorder.view.value.phase).toBe('grace');
  });

  it('lets five marks be taken back and then no more', () => {
    const recorder = begin();
    tapTimes(recorder, 8);
    for (let i = 0; i < 7; i += 1) recorder.undo(clock.mono + 100 + i);
    expect(recorder.view.value).toMatchObject({ count: 2, canUndo: false });
  });

  it('leaves no gap in the wall clock when the page was busy for 250 ms as the finger came', async () => {
    const recorder = begin();
    tapTimes(recorder, 2);
    pass(2250);
    recorder.tap(clock.mono - 250, 'touch');
    await recorder.finish();
    const capture = await sealed();
    expect(capture.mark_us).toEqual([0, 2_000_000, 4_000_000]);
    expect(capture.events).toEqual([]);
  });

  it('marks a gap when the device slept', async () => {
    const recorder = begin();
    tapTimes(recorder, 2);
    clock.wall += 40_000;
    pass(2000);
    tapTimes(recorder, 1);
    await recorder.finish();
    expect((await sealed()).events).toMatchObject([{ kind: 'clock_gap', after_mark: 1, wall_minus_mono_ms: 40_000 }]);
  });

  it('writes what happened to the page with the mark it came after', async () => {
    const recorder = begin();
    recorder.happened(clock.mono - 500, 'rotated');
    tapTimes(recorder, 2);
    recorder.happened(clock.mono + 400, 'hidden');
    await recorder.finish();
    expect((await sealed()).events).toEqual([{ kind: 'hidden', at_us: 2_400_000, after_mark: 1 }]);
  });

  it('says when rows had vanished from storage and saves the whole run all the same', async () => {
    const recorder = begin();
    tapTimes(recorder, 4);
    vi.useRealTimers();
    await vi.waitUntil(async () => (await store.recordingEvents.count()) === 4);
    await Promise.all([store.recordings.clear(), store.recordingEvents.clear()]);
    pass(2000);
    tapTimes(recorder, 2);
    await recorder.finish();
    expect(recorder.view.value).toMatchObject({ phase: 'saved', rewritten: 4 });
    expect((await sealed()).mark_us).toHaveLength(6);
  });

  it('says so within 2 s when storage stays silent, goes on counting, and mends it when storage is back', async () => {
    const recorder = begin();
    const add = vi.spyOn(store.recordingEvents, 'add').mockReturnValue(new Promise(() => undefined) as never);
    tapTimes(recorder, 1);
    await vi.advanceTimersByTimeAsync(WRITE_DEADLINE_MS);
    expect(recorder.isFailing.value).toBe(true);
    pass(2000);
    tapTimes(recorder, 1);
    expect(recorder.view.value.count).toBe(1);
    add.mockRestore();
    pass(2000);
    tapTimes(recorder, 1);
    await eventually(() => expect(recorder.isFailing.value).toBe(false));
    await vi.advanceTimersByTimeAsync(2 * WRITE_DEADLINE_MS);
    expect(recorder.isFailing.value).toBe(false);
    expect(await store.recordingEvents.count()).toBe(3);
  });

  it('holds the run and lets it be saved again when storage takes nothing at the end', async () => {
    const recorder = begin();
    tapTimes(recorder, 3);
    vi.useRealTimers();
    await vi.waitUntil(async () => (await store.recordingEvents.count()) === 3);
    store.close({ disableAutoOpen: true });
    const reopen = vi.spyOn(store, 'open').mockRejectedValue(new Error('no storage') as never);
    await recorder.finish();
    expect(recorder.view.value.phase).toBe('unsaved');
    expect(JSON.parse(recorder.asText()!).capture.mark_us).toEqual([0, 2_000_000, 4_000_000]);
    reopen.mockRestore();
    await recorder.sealAgain();
    expect(recorder.view.value.phase).toBe('saved');
    expect(await store.runs.count()).toBe(1);
  });

  it('takes nothing more once it is being saved', async () => {
    const recorder = begin();
    tapTimes(recorder, 3);
    const finished = recorder.finish();
    pass(2000);
    expect(recorder.tap(clock.mono, 'touch')).toBe(false);
    await finished;
    expect((await sealed()).mark_us).toHaveLength(3);
  });

  it('makes no run of a tap that was taken back', async () => {
    const recorder = begin();
    tapTimes(recorder, 1);
    recorder.undo(clock.mono + 500);
    await recorder.finish();
    expect(recorder.hasMark()).toBe(false);
    expect(await store.runs.count()).toBe(0);
    expect(await store.recordings.toArray()).toMatchObject([{ state: 'discarded' }]);
  });
});
