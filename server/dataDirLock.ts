import { once } from 'node:events';
import { join } from 'node:path';
import sqlite3 from 'sqlite3';
import { ConfigError } from './config';

/**
 * Holds DATA_DIR for this process alone, by a lock the operating system lets go of however the process
 * ends. The database may only have one writer, and a restore must not run under a server.
 *
 * @throws {ConfigError} when another process holds it
 */
export async function lockDataDir(dataDir: string): Promise<() => Promise<void>> {
  const database = new sqlite3.Database(join(dataDir, 'lock.sqlite3'));
  await once(database, 'open');
  try {
    await execute(database, 'PRAGMA busy_timeout = 0; BEGIN EXCLUSIVE');
  } catch (error) {
    await close(database);
    if ((error as NodeJS.ErrnoException).code !== 'SQLITE_BUSY') throw error;
    throw new ConfigError(
      `${dataDir} is in use by a running Swaymark server. Stop it first, or give another DATA_DIR.`,
    );
  }
  return () => close(database);
}

const execute = (database: sqlite3.Database, sql: string) =>
  new Promise<void>((resolve, reject) => database.exec(sql, (error) => (error ? reject(error) : resolve())));
const close = (database: sqlite3.Database) => new Promise<void>((resolve) => database.close(() => resolve()));
