import type { Me } from '@shared/schemas/accounts';
import { closeStore, LocalStore, ownerKey, strictly, type EditRow, type RunRow } from './localStore';
import { nextCreatedSeq } from './meta';

/** Runs timed before joining: they move into the account, and are let go of only once they are on disk there. */

/** How many runs the guest store holds, cut-short ones included. */
export async function countGuestRuns(): Promise<number> {
  return withGuest(
    async (guest) => (await guest.runs.count()) + (await guest.recordings.where({ state: 'open' }).count()),
  );
}

/**
 * Moves the guest's runs and edits into `account`, in the order they were made. A crash on the way
 * leaves a copy in both; the next call finishes the move.
 *
 * @param withRecordings  also move cut-short recordings; false while one is being timed
 * @returns               how many runs moved
 */
export async function claimGuest(account: LocalStore, me: Me, withRecordings: boolean): Promise<number> {
  if (account.owner !== ownerKey(me)) throw new Error('claimGuest: this store is somebody else’s');
  return withGuest(async (guest) => {
    const runs = await guest.runs.orderBy('created_seq').toArray();
    const edits = await guest.edits.orderBy('created_seq').toArray();
    await addAll(account, me, runs, edits);
    if (withRecordings) await moveRecordings(guest, account);
    await guest.transaction('rw', guest.runs, guest.edits, async () => {
      await guest.runs.bulkDelete(runs.map((row) => row.id));
      await guest.edits.bulkDelete(edits.map((row) => row.id));
    });
    return runs.length;
  });
}

async function addAll(account: LocalStore, me: Me, runs: RunRow[], edits: EditRow[]): Promise<void> {
  const place = me.kind === 'student' ? { class_id: me.class.id, bench: me.bench } : { class_id: null, bench: null };
  const disk = strictly(account);
  const inOrder = [
    ...runs.map((row) => ({ run: row, edit: null, seq: row.created_seq })),
    ...edits.map((row) => ({ run: null, edit: row, seq: row.created_seq })),
  ].sort((a, b) => a.seq - b.seq);
  await disk.transaction('rw', disk.runs, disk.edits, disk.meta, async () => {
    for (const { run, edit } of inOrder) {
      if (run && !(await disk.runs.get(run.id)))
        await disk.runs.add({ ...run, ...place, created_seq: await nextCreatedSeq(disk) });
      if (edit && !(await disk.edits.get(edit.id)))
        await disk.edits.add({ ...edit, created_seq: await nextCreatedSeq(disk) });
    }
  });
}

async function moveRecordings(guest: LocalStore, account: LocalStore): Promise<void> {
  const open = await guest.recordings.where({ state: 'open' }).toArray();
  const ids = open.map((row) => row.id);
  const events = await guest.recordingEvents.where('recording_id').anyOf(ids).toArray();
  const disk = strictly(account);
  await disk.transaction('rw', disk.recordings, disk.recordingEvents, async () => {
    await disk.recordings.bulkPut(open);
    await disk.recordingEvents.bulkPut(events);
  });
  await guest.transaction('rw', guest.recordings, guest.recordingEvents, async () => {
    await guest.recordingEvents.where('recording_id').anyOf(ids).delete();
    await guest.recordings.bulkDelete(ids);
  });
}

async function withGuest<T>(work: (guest: LocalStore) => Promise<T>): Promise<T> {
  const guest = new LocalStore(ownerKey(null));
  try {
    return await work(guest);
  } finally {
    closeStore(guest);
  }
}
