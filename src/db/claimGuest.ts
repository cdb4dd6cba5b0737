import type { Me } from '@shared/schemas/accounts';
import { closeStore, LocalStore, ownerKey, strictly, type EditRow, type RecordingRow, type RunRow } from './localStore';
import { nextCreatedSeq, readMeta, writeMeta } from './meta';

/** Runs timed before joining: they move into the account, and are let go of only once they are on disk there. */

/** Whose each row is to be, by its id, from the moment somebody began to move it: a page may end on the way. */
type Claims = Record<string, string>;

interface Taken {
  runs: RunRow[];
  edits: EditRow[];
  recordings: RecordingRow[];
}

/** How many runs the guest store holds for whoever comes next, cut-short ones included. */
export async function countGuestRuns(): Promise<number> {
  return withGuest(async (guest) => {
    const claims = (await readMeta<Claims>(guest, CLAIMS)) ?? {};
    const runs = await guest.runs.toCollection().primaryKeys();
    const recordings = await guest.recordings.where({ state: 'open' }).primaryKeys();
    return [...runs, ...recordings].filter((id) => !claims[id]).length;
  });
}

/**
 * Moves the guest's runs and edits into `account`, in the order they were made. A crash on the way
 * leaves a copy in both; the next call for this account finishes the move, and one for another leaves
 * alone what was begun here.
 *
 * @param withRecordings  also move cut-short recordings; false while one is being timed
 * @param which           begun: only what an earlier call for this account began to move
 * @returns               how many runs moved
 */
export async function claimGuest(
  account: LocalStore,
  me: Me,
  withRecordings: boolean,
  which: 'all' | 'begun' = 'all',
): Promise<number> {
  if (account.owner !== ownerKey(me)) throw new Error('claimGuest: this store is somebody else’s');
  return withGuest(async (guest) => {
    const taken = await take(guest, account.owner, withRecordings, which);
    await addAll(account, me, taken.runs, taken.edits);
    await copyRecordings(guest, account, taken.recordings);
    await letGo(guest, taken);
    return taken.runs.length;
  });
}

const CLAIMS = 'claims';

/** Chooses what is to move and notes for whom, before the first row is copied. */
async function take(guest: LocalStore, owner: string, withRecordings: boolean, which: 'all' | 'begun'): Promise<Taken> {
  const disk = strictly(guest);
  return disk.transaction('rw', disk.runs, disk.edits, disk.recordings, disk.meta, async () => {
    const claims = (await readMeta<Claims>(disk, CLAIMS)) ?? {};
    const nobody = which === 'all' ? owner : undefined;
    const isOwners = (row: { id: string; run_id?: string }) =>
      (claims[row.id] ?? claims[row.run_id ?? ''] ?? nobody) === owner;
    const open = withRecordings ? await disk.recordings.where({ state: 'open' }).toArray() : [];
    const taken = {
      runs: (await disk.runs.orderBy('created_seq').toArray()).filter(isOwners),
      edits: (await disk.edits.orderBy('created_seq').toArray()).filter(isOwners),
      recordings: open.filter(isOwners),
    };
    for (const id of idsOf(taken)) claims[id] = owner;
    await writeMeta(disk, CLAIMS, claims);
    return taken;
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

async function copyRecordings(guest: LocalStore, account: LocalStore, recordings: RecordingRow[]): Promise<void> {
  if (recordings.length === 0) return;
  const events = await eventsOf(guest, recordings).toArray();
  const disk = strictly(account);
  await disk.transaction('rw', disk.recordings, disk.recordingEvents, async () => {
    await disk.recordings.bulkPut(recordings);
    await disk.recordingEvents.bulkPut(events);
  });
}

async function letGo(guest: LocalStore, taken: Taken): Promise<void> {
  const { runs, edits, recordings, recordingEvents, meta } = guest;
  await guest.transaction('rw', [runs, edits, recordings, recordingEvents, meta], async () => {
    await runs.bulkDelete(taken.runs.map(({ id }) => id));
    await edits.bulkDelete(taken.edits.map(({ id }) => id));
    await eventsOf(guest, taken.recordings).delete();
    await recordings.bulkDelete(taken.recordings.map(({ id }) => id));
    const moved = new Set(idsOf(taken));
    const claims = Object.entries((await readMeta<Claims>(guest, CLAIMS)) ?? {});
    await writeMeta(guest, CLAIMS, Object.fromEntries(claims.filter(([id]) => !moved.has(id))));
  });
}

const idsOf = ({ runs, edits, recordings }: Taken): string[] => [...runs, ...edits, ...recordings].map(({ id }) => id);
const eventsOf = (store: LocalStore, recordings: RecordingRow[]) =>
  store.recordingEvents.where('recording_id').anyOf(recordings.map(({ id }) => id));

async function withGuest<T>(work: (guest: LocalStore) => Promise<T>): Promise<T> {
  const guest = new LocalStore(ownerKey(null));
  try {
    return await work(guest);
  } finally {
    closeStore(guest);
  }
}
