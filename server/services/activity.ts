import type { Transaction } from 'sequelize';
import type { Deps } from '../deps';
import { isSignedIn, type Actor } from '../policies/actor';

/** Writes down, in the caller's transaction, that this actor did or tried this to that subject. */
export async function noteActivity(
  { database, now }: Pick<Deps, 'database' | 'now'>,
  actor: Actor,
  action: string,
  subject: string,
  transaction: Transaction,
): Promise<void> {
  await database.models.ActivityEntry.create(
    { at_ms: now(), actor_kind: actor.kind, actor_id: isSignedIn(actor) ? actor.id : null, action, subject },
    { transaction },
  );
}
