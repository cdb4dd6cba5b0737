import { existsSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import sqlite3 from 'sqlite3';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { backupDatabase, restoreDatabase } from '../../server/services/backup';
import { startServer, type TestServer } from '../support/startServer';
import { createApiClient } from './helpers/apiClient';
import { createSchool, must, PASSWORD, tokenIn } from './helpers/people';
import { batch, runItem } from './helpers/runs';

let folder: string;
let dataDir: string;
let file: string;
let server: TestServer;
beforeEach(async () => {
  folder = mkdtempSync(join(tmpdir(), 'swaymark-backup-'));
  dataDir = join(folder, 'data');
  file = join(folder, 'backup.sqlite3');
  server = await startServer({ dataDir });
});
afterEach(async () => {
  await server.stop();
  rmSync(folder, { recursive: true, force: true });
});

test('R12 after a restore the epoch is new, what the backup held is there, and the phone’s resend fills the rest', async () => {
  const { student, ownClass } = await createSchool(server);
  const [kept, lost] = [runItem(), runItem()];
  const first = must(await student.post('/api/sync', batch([kept])));
  await backupDatabase(dataDir, file);
  must(await student.post('/api/sync', batch([lost])));
  await server.stop();
  const { keptAs } = await restoreDatabase(dataDir, file);
  server = await startServer({ dataDir });
  const client = createApiClient(server.url);
  const { nickname, bench, pin } = student;
  must(await client.post('/api/return', { code: ownClass.code, bench, nickname, pin }));
  const again = must(await client.post('/api/sync', batch([kept, lost])));
  expect(again.server_epoch).not.toBe(first.server_epoch);
  expect(again.verdicts.map((each: { verdict: string }) => each.verdict)).toEqual(['already', 'stored']);
  expect(again.verdicts[0].receipt).toEqual(first.verdicts[0].receipt);
  expect(existsSync(keptAs!)).toBe(true);
});

test('a backup taken while twenty phones hand in is whole', async () => {
  const { student, teacher } = await createSchool(server);
  const sending = Promise.all(Array.from({ length: 20 }, () => student.post('/api/sync', batch([runItem()]))));
  await backupDatabase(dataDir, file);
  await sending;
  const other = join(folder, 'other');
  await restoreDatabase(other, file);
  const copy = await startServer({ dataDir: other });
  const client = createApiClient(copy.url);
  must(await client.post('/api/sign-in', { email: 'mira@example.org', password: PASSWORD }));
  expect(must(await client.get('/api/classes')).classes).toHaveLength(1);
  expect(teacher.me.kind).toBe('teacher');
  await copy.stop();
});

test('what was there before the restore is kept whole, with what was still in its journal', async () => {
  const { student } = await createSchool(server);
  await backupDatabase(dataDir, file);
  must(await student.post('/api/sync', batch([runItem()])));
  await server.stop();
  const { keptAs } = await restoreDatabase(dataDir, file);
  const third = join(folder, 'third');
  await restoreDatabase(third, keptAs!);
  const copy = await startServer({ dataDir: third });
  expect(await copy.running.deps.database.models.Run.count()).toBe(1);
  await copy.stop();
  server = await startServer({ dataDir });
  expect(await server.running.deps.database.models.Run.count()).toBe(0);
});

test.each([
  ['that is no database any more', (content: Buffer) => content.fill('x', 0, 100)],
  ['with a page overwritten', (content: Buffer) => content.fill(0xff, 4096, 8192)],
  ['cut off', (content: Buffer) => content.subarray(0, 5_000)],
])('a database %s is kept as it was, and the backup takes its place', async (_what, damage) => {
  await createSchool(server);
  await backupDatabase(dataDir, file);
  await server.stop();
  const damaged = damage(readFileSync(join(dataDir, 'swaymark.sqlite3')));
  writeFileSync(join(dataDir, 'swaymark.sqlite3'), damaged);
  writeFileSync(join(dataDir, 'swaymark.sqlite3-wal'), 'half a journal');
  const { keptAs } = await restoreDatabase(dataDir, file);
  expect(readFileSync(keptAs!).equals(damaged)).toBe(true);
  expect(readFileSync(`${keptAs}-wal`, 'utf8')).toBe('half a journal');
  expect(readdirSync(dataDir).filter((name) => name.includes('.part'))).toEqual([]);
  server = await startServer({ dataDir });
  expect(await server.running.deps.database.models.StaffAccount.count()).toBe(4);
});

test('a restore leaves nothing half done behind when it fails', async () => {
  await backupDatabase(dataDir, file);
  await server.stop();
  await runSql(file, 'DROP TABLE sign_ins');
  await expect(restoreDatabase(dataDir, file)).rejects.toThrow(/sign_ins/);
  expect(readdirSync(dataDir).filter((name) => /part|before/.test(name))).toEqual([]);
  server = await startServer({ dataDir });
});

test('a sign-in that was ended after the backup, and a link used after it, stay so', async () => {
  const { coordinator, teacher } = await createSchool(server);
  must(await coordinator.post('/api/invites', { email: 'late@example.org', role: 'coordinator' }));
  const token = tokenIn((await server.mails()).at(-1)!, 'invite');
  await backupDatabase(dataDir, file);
  const { cookie } = teacher;
  must(await teacher.post('/api/sign-out'));
  await server.stop();
  await restoreDatabase(dataDir, file);
  server = await startServer({ dataDir });
  const client = createApiClient(server.url);
  client.cookie = cookie;
  expect((await client.get('/api/classes')).status).toBe(401);
  const accepted = await client.post('/api/invites/accept', { token, name: 'Late', password: PASSWORD });
  expect(accepted.status).toBe(410);
});

test('restore refuses while a server runs on the folder', async () => {
  await backupDatabase(dataDir, file);
  await expect(restoreDatabase(dataDir, file)).rejects.toThrow(/in use by a running Swaymark server/);
});

test('a second server on the same folder is refused', async () => {
  await expect(startServer({ dataDir })).rejects.toThrow(/in use by a running Swaymark server/);
});

test('a file that is no whole database is refused and nothing is touched', async () => {
  await createSchool(server);
  await server.stop();
  const bad = join(folder, 'bad.sqlite3');
  writeFileSync(bad, 'not a database, by any reading of the word');
  await expect(restoreDatabase(dataDir, bad)).rejects.toThrow(/is not a whole Swaymark database/);
  server = await startServer({ dataDir });
  expect(await server.running.deps.database.models.StaffAccount.count()).toBe(4);
});

test('a backup leaves one file and no half of one', async () => {
  await backupDatabase(dataDir, file);
  expect(readdirSync(folder).sort()).toEqual(['backup.sqlite3', 'data']);
});

const runSql = (path: string, sql: string) =>
  new Promise<void>((resolve, reject) => {
    const database = new sqlite3.Database(path);
    database.exec(sql, (error) => database.close(() => (error ? reject(error) : resolve())));
  });
