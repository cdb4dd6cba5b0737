import type { Transaction } from 'sequelize';
import type { EditChange, RawEdit } from '@shared/schemas/edit';
import type { Deps } from '../../deps';
import { selectWhereIn } from '../../models/selectWhereIn';
import type { Delivery, EditItem } from './handIn';

/**
 * Whether a run counts is for whoever timed it and for staff to say, not for the rest of the bench.
 *
 * @returns  of these edits, those by which a student would set somebody else's run aside or take it back,
 *           through whatever chain of withdrawals
 */
export async function settingOthersAside(
  deps: Deps,
  delivery: Delivery,
  items: readonly EditItem[],
  runs: ReadonlyMap<string, { owner_id: string }>,
  transaction: Transaction,
): Promise<Set<EditItem>> {
  const { actor } = delivery;
  if (actor.kind !== 'student') return new Set();
  const delivered = await deliveredBy(deps, actor.id, [...runs.keys()], transaction);
  const isOthers = ({ run_id }: EditItem) => runs.get(run_id)?.owner_id !== actor.id && !delivered.has(run_id);
  const doubtful = items.filter((item) => isOthers(item) && ['set_aside', 'withdraw'].includes(changeOf(item).kind));
  if (doubtful.length === 0) return new Set();
  const held = await selectWhereIn<{ id: string; raw: string }>(
    deps.database,
    'SELECT id, raw FROM edits',
    'run_id',
    doubtful.map(({ run_id }) => run_id),
    transaction,
  );
  const changes = new Map([...items, ...held].map((edit) => [edit.id, changeOf(edit)]));
  return new Set(doubtful.filter((item) => rootOf(changeOf(item), changes).kind === 'set_aside'));
}

/** What a withdrawal, or a withdrawal of one, is about in the end. */
function rootOf(change: EditChange, changes: ReadonlyMap<string, EditChange>): EditChange {
  const seen = new Set<EditChange>();
  let root = change;
  while (root.kind === 'withdraw' && !seen.has(root)) {
    seen.add(root);
    root = changes.get(root.edit_id) ?? root;
  }
  return root;
}

/** A run the teacher collected is its maker's as well, once the maker's own phone has sent it. */
async function deliveredBy({ database }: Deps, id: string, runIds: readonly string[], transaction: Transaction) {
  const rows = await selectWhereIn<{ run_id: string; by_id: string }>(
    database,
    'SELECT run_id, by_id FROM run_deliveries',
    'run_id',
    runIds,
    transaction,
  );
  return new Set(rows.filter(({ by_id }) => by_id === id).map(({ run_id }) => run_id));
}

/** The text was read and checked before it came here. */
const changeOf = ({ raw }: { raw: string }) => (JSON.parse(raw) as RawEdit).change;
