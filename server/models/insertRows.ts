import type { Transaction } from 'sequelize';
import type { Database } from './openDatabase';

type Cell = string | number | null;

/**
 * Inserts rows in one statement with bound values; a unique key that is taken makes the whole
 * transaction fail. Literals are not used because they cannot carry a NUL and change some doubles.
 * Upserts are not, because an id that a client chose must never overwrite another's row: callers
 * read what is there first, which is exact under the one write lock.
 */
export async function insertRows(
  database: Database,
  table: string,
  rows: readonly Record<string, Cell>[],
  transaction: Transaction,
  { onConflict = '' }: { onConflict?: '' | 'ON CONFLICT DO NOTHING' } = {},
): Promise<void> {
  if (rows.length === 0) return;
  const columns = Object.keys(rows[0]!);
  const bind: Cell[] = [];
  const tuples = rows.map((row) => `(${columns.map((column) => `$${bind.push(row[column] ?? null)}`).join(', ')})`);
  await database.run(
    `INSERT INTO ${table} (${columns.join(', ')}) VALUES ${tuples.join(', ')} ${onConflict}`,
    bind,
    transaction,
  );
}
