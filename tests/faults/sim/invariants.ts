import type { EditRow, MetaRow, RecordingRow, RunRow } from '@/db/localStore';
import { ownerKey } from '@/db/localStore';
import type { Me } from '@shared/schemas/accounts';
import type { SyncAnswer } from '@shared/schemas/sync';
import { whyNotMade, type Made } from './made';
import type { Phone } from './phone';
import type { World } from './world';

/** What must hold after every step, whatever went wrong before it. Each broken one throws with what was seen. */

interface ServerRow {
  seq: number;
  id: string;
  digest: string;
  raw: string;
  owner_id: string;
  receipt_code: string;
}
export interface ServerRows {
  epoch: string;
  runs: Map<string, ServerRow>;
  edits: Map<string, ServerRow>;
}

export interface StoreRows {
  phone: number;
  owner: string;
  epoch: string | undefined;
  runs: RunRow[];
  edits: EditRow[];
  recordings: RecordingRow[];
}

export class Broken extends Error {
  override name = 'Broken';
}

const must = (holds: boolean, what: () => string) => {
  if (!holds) throw new Broken(what());
};

export async function serverRows({ server }: World): Promise<ServerRows | null> {
  if (!server.isUp) return null;
  const { database, epoch } = server.deps;
  const read = async (table: string, owner: string) => {
    const rows = await database.select<ServerRow>(
      `SELECT seq, id, digest, raw, ${owner} AS owner_id, receipt_code FROM ${table} ORDER BY seq`,
      [],
    );
    return new Map(rows.map((row) => [row.id, row]));
  };
  return { epoch, runs: await read('runs', 'owner_id'), edits: await read('edits', 'author_id') };
}

/** Every account's store on every phone, as it is on disk. */
export function storesOf(phone: Phone): StoreRows[] {
  return phone.disk
    .databases()
    .filter((name) => name.startsWith(`${phone.name}/swaymark-`))
    .map((name) => ({
      phone: phone.index,
      owner: name.slice(`${phone.name}/swaymark-`.length),
      epoch: phone.disk.rows<MetaRow>(name, 'meta').find(({ key }) => key === 'server_epoch')?.content as
        string | undefined,
      runs: phone.disk.rows<RunRow>(name, 'runs'),
      edits: phone.disk.rows<EditRow>(name, 'edits'),
      recordings: phone.disk.rows<RecordingRow>(name, 'recordings'),
    }));
}

export async function checkAlways(world: World): Promise<void> {
  const held = await serverRows(world);
  const stores = world.phones.flatMap(storesOf);
  for (const store of stores) adopt(world, store);
  for (const store of stores) checkStore(world, store, held);
  if (held) checkServer(world, held);
  checkNothingVanished(world, stores);
  if (held) checkGiven(world, held);
}

/** server rows ⊆ things made, each under its maker and with its bytes. */
function checkServer(world: World, held: ServerRows): void {
  for (const [type, rows] of [
    ['run', held.runs],
    ['edit', held.edits],
  ] as const)
    for (const row of rows.values()) {
      const made = world.made.get(row.id);
      must(made?.type === type, () => `the server holds the ${type} ${row.id}, which nobody made`);
      must(made!.fate === 'good', () => `the server took ${row.id}, which it was to refuse`);
      const why = whyNotMade(made!, row.digest, row.raw);
      must(why === null, () => `the server's ${type} ${row.id}: ${why}`);
      must(made!.owner?.endsWith(row.owner_id) ?? false, () => `${row.id} of ${made!.owner} is under ${row.owner_id}`);
    }
}

function checkStore(world: World, store: StoreRows, held: ServerRows | null): void {
  for (const [type, rows] of [
    ['run', store.runs],
    ['edit', store.edits],
  ] as const)
    for (const row of rows) {
      const where = `${type} ${row.id} in ${store.owner} on phone ${store.phone}`;
      const made = world.made.get(row.id);
      must(made?.type === type, () => `${where}: nobody made it`);
      const why = whyNotMade(made!, row.digest, row.raw);
      must(why === null, () => `${where}: ${why}`);
      Object.assign(made!, { digest: row.digest, raw: row.raw });
      if (row.origin === 'mine') checkMine(store, row, made!, where);
      else must(world.maySee(store.owner, made!), () => `${where}: made by ${made!.owner}, not for these eyes`);
      must(
        (row.state === 'received') === (row.receipt !== null),
        () => `${where}: ${row.state}, receipt ${row.receipt?.code}`,
      );
      must((row.state === 'refused') === (row.refusal !== null), () => `${where}: ${row.state} without a reason`);
      must(
        row.state !== 'refused' || (made!.fate === 'refusable' && row.refusal!.code !== ''),
        () => `${where}: refused as ${row.refusal?.code}`,
      );
      if (row.state === 'received' && held && store.epoch === held.epoch)
        must(
          (type === 'run' ? held.runs : held.edits).get(row.id)?.digest === row.digest,
          () => `${where} has receipt ${row.receipt!.code}, and the server does not hold it`,
        );
    }
}

/** What a page made while it was still finding out who is here, and what was made as a guest, is of the first account that has it. */
function adopt(world: World, store: StoreRows): void {
  for (const row of [...store.runs, ...store.edits]) {
    const made = world.made.get(row.id);
    if (!made || row.origin !== 'mine') continue;
    if (made.owner === null || (made.owner === 'guest' && store.owner !== 'guest')) made.owner = store.owner;
  }
}

/** It was made in this store, or in the guest's of this phone and claimed since. */
function checkMine(store: StoreRows, row: RunRow | EditRow, made: Made, where: string): void {
  const isLeftBehind = store.owner === 'guest' && made.owner !== 'guest';
  must(made.owner === store.owner || isLeftBehind, () => `${where}: was made by ${made.owner}`);
  must(made.phone === store.phone, () => `${where}: was made on phone ${made.phone}`);
  must(row.created_seq > 0, () => `${where}: has no place in the order of this phone`);
}

/** What somebody was told is kept is on its phone: as a row, or as taps of a run that is still open. */
function checkNothingVanished(world: World, stores: StoreRows[]): void {
  for (const made of world.made.every()) {
    const here = stores.filter(({ phone }) => phone === made.phone);
    const isRow = here.some(({ runs, edits }) =>
      (made.type === 'run' ? runs : edits).some((row) => row.id === made.id && row.origin === 'mine'),
    );
    const isOpen = here.some(({ recordings }) => recordings.some((row) => row.id === made.id && row.state === 'open'));
    if (made.isKept) must(isRow, () => `${made.type} ${made.id} was kept on phone ${made.phone} and is gone`);
    if (made.digest !== null) must(isRow, () => `${made.type} ${made.id} was on phone ${made.phone} and is gone`);
    if (made.taps && made.taps.kept > 0)
      must(isRow || isOpen, () => `${made.taps!.kept} taps of ${made.id} were kept and are gone`);
  }
}

/** receipts given ⊆ server rows, and one receipt for one item in one life of the server. */
function checkGiven(world: World, held: ServerRows): void {
  for (const { id, type, digest, receipt } of world.given.get(held.epoch)?.values() ?? []) {
    const row = (type === 'run' ? held.runs : held.edits).get(id);
    must(row?.digest === digest, () => `receipt ${receipt.code} was given for the ${type} ${id}, and it is not held`);
    must(row!.receipt_code === receipt.code, () => `two receipts for ${id}: ${receipt.code}, ${row!.receipt_code}`);
  }
}

export type Given = Extract<SyncAnswer['verdicts'][number], { verdict: 'stored' | 'already' }>;

/** What must hold once all is healed and still: nothing waits, and phones and server say the same. */
/**
 * With the network and the server well again, a page that is left alone finds out who is signed in and sends
 * all it has; only an edit of a run that another phone has yet to send may wait.
 */
export async function checkDrainedAlone(world: World): Promise<void> {
  await checkAlways(world);
  const held = (await serverRows(world))!;
  for (const phone of world.phones) {
    const me = phone.disk
      .rows<{ key: string; content: Me }>(`${phone.name}/swaymark`, 'rows')
      .find(({ key }) => key === 'me');
    const owner = ownerKey(me?.content ?? null);
    const pages = phone.tabs.filter((tab) => tab !== null).map(({ page }) => page.session);
    const isHere = pages.filter((session) => session.me && ownerKey(session.me) === owner);
    must(
      isHere.every(({ standing }) => standing !== 'unknown'),
      () => `a page of ${owner} on phone ${phone.index} still does not know whether it is signed in`,
    );
    if (!isHere.some(({ standing }) => standing === 'confirmed')) continue;
    const store = storesOf(phone).find((one) => one.owner === owner);
    const waiting = [...(store?.runs ?? []), ...(store?.edits ?? []).filter(({ run_id }) => held.runs.has(run_id))];
    for (const { id, state } of waiting)
      must(state !== 'waiting', () => `${id} of ${owner} still waits on phone ${phone.index}`);
  }
}

export async function checkHealed(world: World): Promise<void> {
  await checkAlways(world);
  const held = (await serverRows(world))!;
  const stores = world.phones.flatMap(storesOf);
  for (const made of world.made.every()) {
    if (made.digest === null && !made.isKept) continue;
    const onServer = (made.type === 'run' ? held.runs : held.edits).get(made.id);
    if (made.fate === 'good')
      must(onServer?.digest === made.digest, () => `${made.type} ${made.id} of ${made.owner} did not arrive`);
  }
  for (const store of stores) {
    const open = store.recordings.filter(({ state }) => state === 'open');
    must(open.length === 0, () => `${store.owner} on phone ${store.phone} still has an open recording`);
    if (store.owner === 'guest') {
      must(
        store.runs.length + store.edits.length === 0,
        () => `runs are left in the guest store of phone ${store.phone}`,
      );
      continue;
    }
    for (const row of [...store.runs, ...store.edits]) {
      const expected = world.made.get(row.id)!.fate === 'good' ? 'received' : 'refused';
      must(row.state === expected, () => `${row.id} of ${store.owner} is ${row.state}, should be ${expected}`);
    }
    if (!world.wasHealed(store)) continue;
    for (const [type, rows] of [
      ['run', held.runs],
      ['edit', held.edits],
    ] as const) {
      const ids = new Set((type === 'run' ? store.runs : store.edits).map(({ id }) => id));
      for (const { id } of rows.values())
        if (world.maySee(store.owner, world.made.get(id)!))
          must(ids.has(id), () => `${store.owner} on phone ${store.phone} never heard of the ${type} ${id}`);
    }
  }
}
