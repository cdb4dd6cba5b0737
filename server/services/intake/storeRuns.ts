import type { Transaction } from 'sequelize';
import { MAX_RUNS_PER_DAY } from '@shared/schemas/limits';
import type { SyncItem, Verdict } from '@shared/schemas/sync';
import type { Deps } from '../../deps';
import { insertRows } from '../../models/insertRows';
import { selectWhereIn } from '../../models/selectWhereIn';
import { noteActivity } from '../activity';
import { newReceiptCode } from '../secrets';
import type { Delivery, RunItem } from './handIn';
import { CLASS_NOT_YOURS, DAY_IS_FULL, NOT_YOURS, OTHER_BYTES, notTaken, taken, type Reason } from './verdicts';

type RunRow = {
  seq: number;
  id: string;
  digest: string;
  raw: string;
  owner_kind: 'staff' | 'student';
  owner_id: string;
  class_id: string | null;
  bench: number | null;
  device_id: string;
  received_ms: number;
  clock_skew_ms: number;
  receipt_code: string;
};
type HeldRun = Omit<RunRow, 'raw' | 'device_id' | 'clock_skew_ms'>;

const DAY_MS = 86_400_000;

export async function storeRuns(
  deps: Deps,
  delivery: Delivery,
  items: readonly RunItem[],
  verdicts: Map<SyncItem, Verdict>,
  transaction: Transaction,
): Promise<void> {
  const { database } = deps;
  const { actor } = delivery;
  const held = new Map<string, HeldRun>();
  for (const row of await heldRuns(deps, items, transaction)) held.set(row.id, row);
  let left = MAX_RUNS_PER_DAY - (items.length > 0 ? await runsToday(deps, delivery, transaction) : 0);
  const fresh: RunRow[] = [];
  const delivered: string[] = [];
  for (const item of items) {
    const there = held.get(item.id);
    const reason = there ? reasonAgainstHeld(delivery, item, there) : reasonAgainstNew(delivery, item, left);
    if (reason) {
      verdicts.set(item, notTaken(item, reason));
      if (reason === NOT_YOURS) await noteActivity(deps, actor, 'runs.foreign_id', item.id, transaction);
      continue;
    }
    delivered.push(item.id);
    if (there) {
      verdicts.set(item, taken(item, 'already', there));
      continue;
    }
    const row: RunRow = {
      seq: delivery.nextSeq(),
      id: item.id,
      digest: item.digest,
      raw: item.raw,
      owner_kind: delivery.owner_kind,
      owner_id: actor.id,
      ...placeOf(delivery, item),
      device_id: delivery.device_id,
      received_ms: delivery.received_ms,
      clock_skew_ms: delivery.clock_skew_ms,
      receipt_code: newReceiptCode(),
    };
    left -= 1;
    fresh.push(row);
    held.set(row.id, row);
    verdicts.set(item, taken(item, 'stored', row));
  }
  await insertRows(database, 'runs', fresh, transaction);
  await insertRows(database, 'feed', fresh.map(feedRow), transaction);
  await insertRows(
    database,
    'run_deliveries',
    delivered.map((run_id) => ({
      run_id,
      by_id: actor.id,
      device_id: delivery.device_id,
      received_ms: delivery.received_ms,
    })),
    transaction,
    { onConflict: 'ON CONFLICT DO NOTHING' },
  );
}

/**
 * The same run may come a second time by another way: the student's own phone after the teacher
 * collected it, or the other way round. Anybody else's id is refused, whatever the bytes.
 */
function reasonAgainstHeld({ actor, ownClassIds }: Delivery, item: RunItem, there: HeldRun): Reason | undefined {
  const reaches =
    there.owner_id === actor.id ||
    (actor.kind === 'student'
      ? there.owner_kind === 'staff' && there.class_id === actor.student.class_id && there.bench === actor.student.bench
      : there.class_id !== null && ownClassIds.has(there.class_id));
  if (!reaches) return NOT_YOURS;
  return there.digest === item.digest ? undefined : OTHER_BYTES;
}

function reasonAgainstNew({ actor, ownClassIds }: Delivery, item: RunItem, left: number): Reason | undefined {
  if (actor.kind !== 'student' && item.class_id !== null && !ownClassIds.has(item.class_id)) return CLASS_NOT_YOURS;
  return left > 0 ? undefined : DAY_IS_FULL;
}

/** A student's class and bench are the server's to know; whatever the phone says about them is not read. */
function placeOf({ actor }: Delivery, item: RunItem): Pick<RunRow, 'class_id' | 'bench'> {
  return actor.kind === 'student'
    ? { class_id: actor.student.class_id, bench: actor.student.bench }
    : { class_id: item.class_id, bench: item.bench };
}

const feedRow = (run: RunRow) => ({
  seq: run.seq,
  kind: 'run',
  ref_seq: run.seq,
  bytes: run.raw.length,
  class_id: run.class_id,
  bench: run.bench,
  owner_id: run.owner_id,
});

const heldRuns = ({ database }: Deps, items: readonly RunItem[], transaction: Transaction) =>
  selectWhereIn<HeldRun>(
    database,
    'SELECT seq, id, digest, owner_kind, owner_id, class_id, bench, received_ms, receipt_code FROM runs',
    'id',
    items.map(({ id }) => id),
    transaction,
  );

async function runsToday({ database }: Deps, { actor, received_ms }: Delivery, transaction: Transaction) {
  const [row] = await database.select<{ runs: number }>(
    'SELECT count(*) AS runs FROM runs WHERE owner_id = $1 AND received_ms > $2',
    [actor.id, received_ms - DAY_MS],
    transaction,
  );
  return row!.runs;
}
