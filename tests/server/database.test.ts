import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { openDatabase, type Database } from '../../server/models/openDatabase';
import { insertRows } from '../../server/models/insertRows';

let dataDir: string;
let database: Database;
beforeEach(async () => {
  dataDir = mkdtempSync(join(tmpdir(), 'swaymark-database-'));
  database = await openDatabase(dataDir);
});
afterEach(async () => {
  await database.close();
  rmSync(dataDir, { recursive: true, force: true });
});

test('migrations make every table from nothing, once', async () => {
  const tables = async () =>
    (
      await database.select<{ name: string }>(`SELECT name FROM sqlite_master WHERE type = 'table' ORDER BY name`, [])
    ).map(({ name }) => name);
  const first = await tables();
  expect(first).toEqual(expect.arrayContaining(['runs', 'edits', 'feed', 'sign_ins', 'activity_log', 'migrations']));
  await database.close();
  database = await openDatabase(dataDir);
  expect(await tables()).toEqual(first);
  expect(await database.select('SELECT * FROM migrations', [])).toEqual([
    { name: '0001-first-tables' },
    { name: '0002-board-figures' },
  ]);
});

test('every model reads and writes the columns of its table', async () => {
  for (const model of Object.values(database.models) as unknown as (typeof database.models.Run)[]) {
    const columns = await database.select<{ name: string }>(`PRAGMA table_info(${model.tableName})`, []);
    expect(Object.keys(model.getAttributes()).sort()).toEqual(columns.map(({ name }) => name).sort());
  }
});

test('the journal is WAL, and a write transaction is durable and keeps foreign keys', async () => {
  expect(await database.select('PRAGMA journal_mode', [])).toEqual([{ journal_mode: 'wal' }]);
  await database.writeTransaction(async (transaction) => {
    // 2 is FULL: the journal is forced to disk before a receipt leaves.
    expect(await database.select('PRAGMA synchronous', [], transaction)).toEqual([{ synchronous: 2 }]);
    expect(await database.select('PRAGMA foreign_keys', [], transaction)).toEqual([{ foreign_keys: 1 }]);
  });
});

test('two hundred writers that read, wait and write at once all succeed, and no step is lost', async () => {
  await put('counter', '0');
  const step = () =>
    database.writeTransaction(async (transaction) => {
      const [row] = await database.select<{ content: string }>(
        `SELECT content FROM server_meta WHERE key = 'counter'`,
        [],
        transaction,
      );
      await new Promise((resolve) => setTimeout(resolve, 1));
      await database.run(
        `UPDATE server_meta SET content = $1 WHERE key = 'counter'`,
        [String(Number(row!.content) + 1)],
        transaction,
      );
    });
  await Promise.all(Array.from({ length: 200 }, step));
  expect(await get('counter')).toBe('200');
});

test('readers go on while a writer holds the lock', async () => {
  await put('a', 'before');
  await database.writeTransaction(async (transaction) => {
    await database.run(`UPDATE server_meta SET content = 'after' WHERE key = 'a'`, [], transaction);
    expect(await get('a')).toBe('before');
  });
  expect(await get('a')).toBe('after');
});

test('a transaction that throws leaves nothing behind and lets the next one in', async () => {
  const failing = database.writeTransaction(async (transaction) => {
    await insertRows(database, 'server_meta', [{ key: 'x', content: 'half done' }], transaction);
    throw new Error('stop');
  });
  await expect(failing).rejects.toThrow('stop');
  expect(await get('x')).toBeUndefined();
  await put('y', 'next');
  expect(await get('y')).toBe('next');
});

test('a commit that fails is told, leaves nothing behind and does not block the next writer', async () => {
  const failing = database.writeTransaction(async (transaction) => {
    // A deferred foreign key is only looked at when the transaction commits.
    await database.run('PRAGMA defer_foreign_keys = ON', [], transaction);
    await insertRows(
      database,
      'run_deliveries',
      [{ run_id: 'nowhere', by_id: 'a', device_id: 'b', received_ms: 1 }],
      transaction,
    );
  });
  await expect(failing).rejects.toThrow(/FOREIGN KEY/);
  await put('z', 'next');
  expect(await get('z')).toBe('next');
  expect(await database.select('SELECT * FROM run_deliveries', [])).toEqual([]);
});

test.each(['a\u0000b', `'; DROP TABLE runs; --`, '$1 ? :name @x', '🦊\u2028', ''])(
  '%j is stored as it is',
  async (text) => {
    await put('odd', text);
    expect(await get('odd')).toBe(text);
  },
);

test('an insert never takes the place of a row that is there', async () => {
  await put('taken', 'first');
  await expect(put('taken', 'second')).rejects.toThrow();
  await database.writeTransaction((transaction) =>
    insertRows(database, 'server_meta', [{ key: 'taken', content: 'third' }], transaction, {
      onConflict: 'ON CONFLICT DO NOTHING',
    }),
  );
  expect(await get('taken')).toBe('first');
});

test('a column of whole numbers takes no other kind of value', async () => {
  const run = {
    seq: 1,
    id: 'r',
    digest: '',
    raw: '',
    owner_kind: 'student',
    owner_id: '',
    device_id: '',
    receipt_code: '',
  };
  const insert = (received_ms: number | string) =>
    database.writeTransaction((transaction) =>
      insertRows(database, 'runs', [{ ...run, received_ms, clock_skew_ms: 0 }], transaction),
    );
  await expect(insert(1.5)).rejects.toThrow();
  await expect(insert('12abc')).rejects.toThrow();
  await insert(12);
});

const put = (key: string, content: string) =>
  database.writeTransaction((transaction) => insertRows(database, 'server_meta', [{ key, content }], transaction));
async function get(key: string): Promise<string | undefined> {
  const [row] = await database.select<{ content: string }>('SELECT content FROM server_meta WHERE key = $1', [key]);
  return row?.content;
}
