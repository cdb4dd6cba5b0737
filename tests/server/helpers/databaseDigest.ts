import { digestOf } from '@shared/schemas/canonical';
import type { TestServer } from '../../support/startServer';

/** A digest over every row of every table, but for when a sign-in was last seen. */
export async function databaseDigest({ running }: TestServer): Promise<string> {
  const { database } = running.deps;
  const tables = await database.select<{ name: string }>(
    `SELECT name FROM sqlite_master WHERE type = 'table' AND name NOT LIKE 'sqlite_%' ORDER BY name`,
    [],
  );
  const contents: unknown[] = [];
  for (const { name } of tables) {
    const rows = await database.select<Record<string, unknown>>(`SELECT * FROM "${name}"`, []);
    contents.push([name, rows.map((row) => JSON.stringify({ ...row, last_seen_ms: undefined })).sort()]);
  }
  return digestOf(JSON.stringify(contents));
}
