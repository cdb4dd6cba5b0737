import { randomUUID } from 'node:crypto';
import { existsSync } from 'node:fs';
import { chmod, copyFile, mkdir, open, rename, rm } from 'node:fs/promises';
import { dirname, join } from 'node:path';
import sqlite3 from 'sqlite3';
import { ConfigError } from '../config';
import { lockDataDir } from '../dataDirLock';
import { DATABASE_FILE } from '../models/openDatabase';

/**
 * Copies the database into one file, whole even while the server writes: made under another name,
 * forced to disk, checked, and only then given its name.
 */
export async function backupDatabase(dataDir: string, file: string): Promise<void> {
  const source = join(dataDir, DATABASE_FILE);
  if (!existsSync(source)) throw new ConfigError(`There is no database in ${dataDir}: set DATA_DIR to the server's.`);
  const part = `${file}.part`;
  await rm(part, { force: true });
  await using(source, (database) => all(database, 'VACUUM INTO ?', [part]));
  await mustBeWhole(part);
  await forceToDisk(part);
  await rename(part, file);
  await forceToDisk(dirname(file));
}

/**
 * Puts a backup in the place of the database and keeps what was there, damaged or not, unopened. The
 * restored one gets a new epoch: by it the phones see that the server's memory went back, and hand in
 * again what it lacks. Nobody is signed in on it and no link works: a sign-in or link that was ended
 * after the backup would otherwise be good again.
 *
 * @throws {ConfigError} when a server is running on the folder, or the file is no Swaymark backup
 */
export async function restoreDatabase(dataDir: string, file: string): Promise<{ keptAs: string | null }> {
  await mkdir(dataDir, { recursive: true, mode: 0o700 });
  const unlock = await lockDataDir(dataDir);
  const target = join(dataDir, DATABASE_FILE);
  const part = `${target}.part`;
  try {
    await mustBeWhole(file);
    await copyFile(file, part);
    await using(part, beginNewLife);
    await chmod(part, 0o600);
    await forceToDisk(part);
    const keptAs = existsSync(target) ? `${target}.before-restore-${Date.now()}` : null;
    // A journal is part of the database it lies beside, and belongs to it under its new name too.
    for (const end of DATABASE_ENDS) {
      if (keptAs && existsSync(target + end)) await rename(target + end, keptAs + end);
      else await rm(target + end, { force: true });
    }
    await rename(part, target);
    await forceToDisk(dataDir);
    return { keptAs };
  } finally {
    for (const end of DATABASE_ENDS) await rm(part + end, { force: true });
    await unlock();
  }
}

/** SQLite keeps a database in WAL mode in up to three files. */
const DATABASE_ENDS = ['', '-wal', '-shm'];

async function beginNewLife(database: sqlite3.Database): Promise<void> {
  const now = Date.now();
  await all(database, 'BEGIN IMMEDIATE', []);
  await all(database, `INSERT OR REPLACE INTO server_meta (key, content) VALUES ('epoch', ?)`, [randomUUID()]);
  await all(database, 'UPDATE sign_ins SET revoked_ms = ? WHERE revoked_ms IS NULL', [now]);
  await all(database, 'UPDATE staff_tokens SET used_ms = ? WHERE used_ms IS NULL', [now]);
  await all(database, 'COMMIT', []);
}

async function mustBeWhole(file: string): Promise<void> {
  try {
    await using(file, async (database) => {
      const [found] = await all<{ integrity_check: string }>(database, 'PRAGMA integrity_check', []);
      if (found?.integrity_check !== 'ok') throw new Error(found?.integrity_check);
      const [meta] = await all<{ content: string }>(
        database,
        `SELECT content FROM server_meta WHERE key = 'epoch'`,
        [],
      );
      if (!meta) throw new Error('no epoch');
    });
  } catch (error) {
    throw new ConfigError(
      `${file} is not a whole Swaymark database (${(error as Error).message}). Take another backup.`,
    );
  }
}

async function forceToDisk(path: string): Promise<void> {
  const handle = await open(path, 'r');
  await handle.sync();
  await handle.close();
}

async function using<T>(file: string, work: (database: sqlite3.Database) => Promise<T>): Promise<T> {
  const database = await new Promise<sqlite3.Database>((resolve, reject) => {
    const opened = new sqlite3.Database(file, sqlite3.OPEN_READWRITE, (error) =>
      error ? reject(error) : resolve(opened),
    );
  });
  try {
    return await work(database);
  } finally {
    await new Promise<void>((resolve) => database.close(() => resolve()));
  }
}

const all = <Row>(database: sqlite3.Database, sql: string, bind: unknown[]) =>
  new Promise<Row[]>((resolve, reject) =>
    database.all(sql, bind, (error, rows) => (error ? reject(error) : resolve(rows as Row[]))),
  );
