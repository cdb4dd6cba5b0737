import { randomUUID } from 'node:crypto';
import type { Database } from './openDatabase';

/**
 * The life of this database: made once, and anew when a backup is put back, so that phones notice
 * and hand in again what the backup does not hold.
 */
export async function serverEpoch(database: Database): Promise<string> {
  return database.writeTransaction(async (transaction) => {
    await database.run(
      `INSERT INTO server_meta (key, content) VALUES ('epoch', $1) ON CONFLICT (key) DO NOTHING`,
      [randomUUID()],
      transaction,
    );
    const [row] = await database.select<{ content: string }>(
      `SELECT content FROM server_meta WHERE key = 'epoch'`,
      [],
      transaction,
    );
    return row!.content;
  });
}
