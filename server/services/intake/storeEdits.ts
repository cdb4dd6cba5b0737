import type { Transaction } from 'sequelize';
import type { RawEdit } from '@shared/schemas/edit';
import { MAX_EDITS_PER_DAY } from '@shared/schemas/limits';
import type { SyncItem, Verdict } from '@shared/schemas/sync';
import type { Deps } from '../../deps';
import { insertRows } from '../../models/insertRows';
import { selectWhereIn } from '../../models/selectWhereIn';
import { noteActivity } from '../activity';
import { newReceiptCode } from '../secrets';
import type { Delivery, EditItem } from './handIn';
import { settingOthersAside } from './setAsideRights';
import {
  DAY_IS_FULL,
  EDIT_OF_STAFF,
  NOT_YOUR_RUN,
  NOT_YOURS,
  OTHER_BYTES,
  RUN_NOT_TAKEN,
  RUN_UNKNOWN,
  isNeverTaken,
  notTaken,
  taken,
  type Reason,
} from './verdicts';

type EditRow = {
  seq: number;
  id: string;
  run_id: string;
  digest: string;
  raw: string;
  author_kind: 'staff' | 'student';
  author_id: string;
  device_id: string;
  received_ms: number;
  receipt_code: string;
};
type HeldEdit = Omit<EditRow, 'raw' | 'device_id' | 'author_kind' | 'run_id'>;
interface EditedRun {
  id: string;
  owner_id: string;
  class_id: string | null;
  bench: number | null;
}

const DAY_MS = 86_400_000;

export async function storeEdits(
  deps: Deps,
  delivery: Delivery,
  items: readonly EditItem[],
  verdicts: Map<SyncItem, Verdict>,
  transaction: Transaction,
): Promise<void> {
  if (items.length === 0) return;
  const { database } = deps;
  const { actor } = delivery;
  const held = new Map((await heldEdits(deps, items, transaction)).map((row) => [row.id, row]));
  const runs = new Map((await editedRuns(deps, items, transaction)).map((row) => [row.id, row]));
  const notTakenRuns = new Set(
    [...verdicts].flatMap(([{ type, id }, verdict]) => (type === 'run' && isNeverTaken(verdict) ? [id] : [])),
  );
  const ofStaff = await editsOfStaff(deps, delivery, items, transaction);
  const othersAside = await settingOthersAside(deps, delivery, items, runs, transaction);
  let left = MAX_EDITS_PER_DAY - (await editsToday(deps, delivery, transaction));
  const fresh: EditRow[] = [];
  for (const item of items) {
    const there = held.get(item.id);
    const run = runs.get(item.run_id);
    const reason = there
      ? reasonAgainstHeld(delivery, item, there)
      : (reasonAgainstNew(delivery, run, notTakenRuns.has(item.run_id), left) ??
        (ofStaff.has(withdrawnBy(item)) ? EDIT_OF_STAFF : undefined) ??
        (othersAside.has(item) ? NOT_YOUR_RUN : undefined));
    if (reason) {
      verdicts.set(item, notTaken(item, reason));
      if (reason === NOT_YOURS) await noteActivity(deps, actor, 'edits.foreign_id', item.id, transaction);
      continue;
    }
    if (there) {
      verdicts.set(item, taken(item, 'already', there));
      continue;
    }
    const row: EditRow = {
      seq: delivery.nextSeq(),
      id: item.id,
      run_id: item.run_id,
      digest: item.digest,
      raw: item.raw,
      author_kind: delivery.owner_kind,
      author_id: actor.id,
      device_id: delivery.device_id,
      received_ms: delivery.received_ms,
      receipt_code: newReceiptCode(),
    };
    left -= 1;
    fresh.push(row);
    held.set(row.id, row);
    verdicts.set(item, taken(item, 'stored', row));
  }
  await insertRows(database, 'edits', fresh, transaction);
  await insertRows(
    database,
    'feed',
    fresh.map((edit) => feedRow(edit, runs.get(edit.run_id)!)),
    transaction,
  );
}

function reasonAgainstHeld({ actor }: Delivery, item: EditItem, there: HeldEdit): Reason | undefined {
  if (there.author_id !== actor.id) return NOT_YOURS;
  return there.digest === item.digest ? undefined : OTHER_BYTES;
}

function reasonAgainstNew(
  delivery: Delivery,
  run: EditedRun | undefined,
  runNotTaken: boolean,
  left: number,
): Reason | undefined {
  if (!run) return runNotTaken ? RUN_NOT_TAKEN : RUN_UNKNOWN;
  if (!mayEdit(delivery, run)) return NOT_YOURS;
  return left > 0 ? undefined : DAY_IS_FULL;
}

/** Students: the runs of their bench. Staff: their own runs and those in their classes. */
function mayEdit({ actor, ownClassIds }: Delivery, run: EditedRun): boolean {
  if (actor.kind === 'student') return run.class_id === actor.student.class_id && run.bench === actor.student.bench;
  return run.owner_id === actor.id || (run.class_id !== null && ownClassIds.has(run.class_id));
}

/** Of the edits a student wants to withdraw, those that are not a student's. */
async function editsOfStaff(
  { database }: Deps,
  { actor }: Delivery,
  items: readonly EditItem[],
  transaction: Transaction,
): Promise<Set<string | undefined>> {
  if (actor.kind !== 'student') return new Set();
  const targets = items.map(withdrawnBy).filter((id) => id !== undefined);
  const rows = await selectWhereIn<{ id: string; author_kind: string }>(
    database,
    'SELECT id, author_kind FROM edits',
    'id',
    targets,
    transaction,
  );
  return new Set(rows.filter(({ author_kind }) => author_kind === 'staff').map(({ id }) => id));
}

/** The edit this one takes out of force. The text was read and checked before it came here. */
function withdrawnBy({ raw }: EditItem): string | undefined {
  const { change } = JSON.parse(raw) as RawEdit;
  return change.kind === 'withdraw' ? change.edit_id : undefined;
}

/** An edit is heard of by whoever hears of its run. */
const feedRow = (edit: EditRow, run: EditedRun) => ({
  seq: edit.seq,
  kind: 'edit',
  ref_seq: edit.seq,
  bytes: edit.raw.length,
  class_id: run.class_id,
  bench: run.bench,
  owner_id: run.owner_id,
});

const heldEdits = ({ database }: Deps, items: readonly EditItem[], transaction: Transaction) =>
  selectWhereIn<HeldEdit>(
    database,
    'SELECT seq, id, digest, author_id, received_ms, receipt_code FROM edits',
    'id',
    items.map(({ id }) => id),
    transaction,
  );

const editedRuns = ({ database }: Deps, items: readonly EditItem[], transaction: Transaction) =>
  selectWhereIn<EditedRun>(
    database,
    'SELECT id, owner_id, class_id, bench FROM runs',
    'id',
    items.map(({ run_id }) => run_id),
    transaction,
  );

async function editsToday({ database }: Deps, { actor, received_ms }: Delivery, transaction: Transaction) {
  const [row] = await database.select<{ edits: number }>(
    'SELECT count(*) AS edits FROM edits WHERE author_id = $1 AND received_ms > $2',
    [actor.id, received_ms - DAY_MS],
    transaction,
  );
  return row!.edits;
}
