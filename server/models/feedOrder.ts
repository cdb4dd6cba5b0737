import type { Transaction } from 'sequelize';
import type { Database } from './openDatabase';

/**
 * Hands out the next places in the feed. Only inside a write transaction: there is one writer, so
 * places become visible in the order they are numbered, and a reader's cursor never skips one.
 */
export async function feedOrder(database: Database, transaction: Transaction): Promise<() => number> {
  const [row] = await database.select<{ seq: number }>(
    `SELECT seq FROM sqlite_sequence WHERE name = 'feed'`,
    [],
    transaction,
  );
  let last = row?.seq ?? 0;
  return () => (last += 1);
}

/** The last place that can be read now; 0 in an empty feed. */
export async function topOfFeed(database: Database): Promise<number> {
  const [row] = await database.select<{ top: number | null }>('SELECT max(seq) AS top FROM feed', []);
  return row?.top ?? 0;
}
