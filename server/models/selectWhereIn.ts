import type { Transaction } from 'sequelize';
import type { Database } from './openDatabase';

/** Rows whose `column` is one of the keys, by bound values. */
export async function selectWhereIn<Row extends object>(
  database: Database,
  sql: string,
  column: string,
  keys: readonly (string | number)[],
  transaction?: Transaction,
): Promise<Row[]> {
  if (keys.length === 0) return [];
  const marks = keys.map((_, i) => `$${i + 1}`).join(', ');
  return database.select<Row>(`${sql} WHERE ${column} IN (${marks})`, [...keys], transaction);
}
