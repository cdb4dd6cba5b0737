import type { RawRun } from '@shared/schemas/run';
import type { TapEvent, TapRecording } from '@shared/timing/tapRecording';
import { strictly, type LocalStore, type RecordingRow } from './localStore';
import { addRun, type RunPlace } from './runs';

/**
 * Tap runs while they are timed: one row for everything that happens, written as it happens and never
 * changed. They lie in the account's own store, so nobody else who uses the phone meets them.
 */

/** What a recording is, without its events. */
function openRow(recording: TapRecording): RecordingRow {
  const { id, plan, started_wall_ms, zone_offset_min, clock_step_us, isolated } = recording;
  return { id, state: 'open', plan, started_wall_ms, zone_offset_min, clock_step_us, isolated };
}

/** Writes one row. The first row of a recording brings the recording itself. */
export async function writeEvent(store: LocalStore, recording: TapRecording, event: TapEvent): Promise<void> {
  const row = { recording_id: recording.id, ...event };
  if (event.seq > 1) await store.recordingEvents.add(row);
  else {
    await store.transaction('rw', store.recordings, store.recordingEvents, async () => {
      await store.recordings.add(openRow(recording));
      await store.recordingEvents.add(row);
    });
  }
}

/**
 * Compares what is on disk with what memory holds and writes what is missing there: the browser may
 * have cleared its storage under a run, and every write after it "succeeds" in an empty store.
 *
 * @returns how many rows had to be written again
 */
export async function rewriteMissing(store: LocalStore, recording: TapRecording): Promise<number> {
  // Taken before the transaction: what happens from here on has a write of its own.
  const events = [...recording.events];
  return store.transaction('rw', store.recordings, store.recordingEvents, async () => {
    const onDisk = await store.recordingEvents.where('recording_id').equals(recording.id).toArray();
    const seqs = new Set(onDisk.map((row) => row.seq));
    const missing = events.filter((event) => !seqs.has(event.seq));
    if (!(await store.recordings.get(recording.id))) await store.recordings.add(openRow(recording));
    await store.recordingEvents.bulkAdd(missing.map((event) => ({ recording_id: recording.id, ...event })));
    return missing.length;
  });
}

/** Recordings that were neither sealed nor discarded, with all that was written of them, oldest first. */
export async function openRecordings(store: LocalStore): Promise<TapRecording[]> {
  const rows = await store.recordings.where('state').equals('open').toArray();
  const recordings = await Promise.all(
    rows.map(async (row) => ({
      ...row,
      events: await store.recordingEvents.where('recording_id').equals(row.id).sortBy('seq'),
    })),
  );
  return recordings.sort((a, b) => a.started_wall_ms - b.started_wall_ms);
}

/** The run and the end of its recording are written together or not at all, and are on disk when this comes back. */
export async function sealRecording(store: LocalStore, raw: RawRun, place: RunPlace): Promise<void> {
  const disk = strictly(store);
  await disk.transaction('rw', disk.recordings, disk.runs, disk.meta, async () => {
    await addRun(disk, raw, place);
    await disk.recordings.update(raw.id, { state: 'sealed' });
  });
}

/** Taken out of what is offered. The rows stay, so that it can be brought back. */
export async function discardRecording(store: LocalStore, id: string): Promise<void> {
  await store.recordings.update(id, { state: 'discarded' });
}

export async function bringBackRecording(store: LocalStore, id: string): Promise<void> {
  await store.recordings.update(id, { state: 'open' });
}
