import { chmodSync, existsSync, mkdtempSync, readdirSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { connect } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, expect, test, vi } from 'vitest';
import { createApiClient } from './helpers/apiClient';
import { createClass, joinStudent, must, PASSWORD } from './helpers/people';
import { batch, runItem } from './helpers/runs';
import { runProcess, startProcess, type ServerProcess } from './helpers/serverProcess';

// Each test starts processes of its own, a second or more each.
vi.setConfig({ testTimeout: 120_000 });

let folder: string;
let dataDir: string;
let running: ServerProcess | undefined;
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'swaymark-process-'));
  dataDir = join(folder, 'data');
});
afterEach(async () => {
  await running?.end('SIGKILL');
  running = undefined;
  rmSync(folder, { recursive: true, force: true });
});
const start = async (environment = {}) => (running = await startProcess({ DATA_DIR: dataDir, ...environment }));
const end = async (signal: NodeJS.Signals) => {
  const ended = await running!.end(signal);
  running = undefined;
  return ended;
};
const setUp = (token: string) =>
  createApiClient(running!.url).post('/api/set-up', {
    token,
    name: 'Lead',
    email: 'lead@example.org',
    password: PASSWORD,
  });

test('the first start prints a set-up link; once a coordinator is there, no more', async () => {
  const first = await start();
  expect((await setUp(first.setUpToken!)).status).toBe(200);
  await end('SIGTERM');
  const second = await start();
  expect(second.setUpToken).toBeUndefined();
});

test.each(['SIGTERM', 'SIGINT'] as const)(
  '%s: a request in work is finished, a stuck one cut off, exit 0 within five seconds',
  async (signal) => {
    const { url, setUpToken } = await start();
    const stuck = connect(Number(new URL(url).port), '127.0.0.1');
    stuck.on('error', () => undefined);
    stuck.write('POST /api/sync HTTP/1.1\r\nHost: x\r\nContent-Length: 100\r\n\r\n{');
    const inWork = setUp(setUpToken!);
    await new Promise((resolve) => setTimeout(resolve, 15));
    const ended = await end(signal);
    expect(ended.code).toBe(0);
    expect(ended.ms).toBeLessThan(5_000);
    expect((await inWork).status).toBe(200);
    // No journal left behind: the database was closed.
    expect(existsSync(join(dataDir, 'swaymark.sqlite3-wal'))).toBe(false);
  },
);

test('R4 killed at any moment while phones hand in: every receipt is in the database, whole', async () => {
  await start();
  must(await setUp(running!.setUpToken!));
  const lead = createApiClient(running!.url);
  must(await lead.post('/api/sign-in', { email: 'lead@example.org', password: PASSWORD }));
  const schoolClass = await createClass(lead);
  const { cookie } = await joinStudent({ url: running!.url } as never, schoolClass.code);
  const received = new Map<string, string>();
  for (let round = 0; round < 5; round += 1) {
    const phones = Array.from({ length: 4 }, () => createApiClient(running!.url));
    const sending = Promise.allSettled(
      phones.map(async (phone) => {
        phone.cookie = cookie;
        for (;;) {
          const items = [runItem(), runItem(), runItem()];
          const { verdicts } = must(await phone.post('/api/sync', batch(items)));
          for (const verdict of verdicts) if (verdict.receipt) received.set(verdict.id, verdict.digest);
        }
      }),
    );
    const before = received.size;
    await expect.poll(() => received.size, { timeout: 30_000, interval: 5 }).toBeGreaterThan(before + 5);
    await new Promise((resolve) => setTimeout(resolve, 17 * round));
    await end('SIGKILL');
    await sending;
    await start();
  }
  const phone = createApiClient(running!.url);
  phone.cookie = cookie;
  const held = new Map<string, string>();
  for (let after = 0, more = true; more;) {
    const { items, cursor, more: goesOn } = must(await phone.get(`/api/feed?after=${after}`));
    for (const item of items) if (item.type === 'run') held.set(item.id, item.digest);
    [after, more] = [cursor, goesOn];
  }
  expect(received.size).toBeGreaterThan(20);
  expect([...received].filter(([id, digest]) => held.get(id) !== digest)).toEqual([]);
});

test('the log tells route, status and network of a request, and no link, pass, name, password or whole address', async () => {
  const { url, setUpToken, output } = await start();
  await fetch(`${url}/set-up/${setUpToken}?secret=1`);
  await fetch(`${url}/api/board`, { headers: { 'X-Board-Pass': 'pass-of-a-class' } });
  await setUp(setUpToken!);
  await end('SIGTERM');
  const log = output()
    .split('\n')
    .filter((line) => line.startsWith('{'));
  const lines = log.map((line) => JSON.parse(line) as { route: string; status: number; address: string });
  expect(lines.map(({ route, status }) => `${route} ${status}`)).toEqual([
    expect.stringMatching(/^page (200|404)$/),
    '/api/board 401',
    '/api/set-up 200',
  ]);
  expect(lines.every(({ address }) => address === '127.0.0.0')).toBe(true);
  expect(log.join()).not.toMatch(new RegExp(`${setUpToken}|pass-of|secret|Lead|lead@|${PASSWORD}|127\\.0\\.0\\.1`));
});

test('a port that is in use, and a folder that is, are told in words', async () => {
  const { url } = await start();
  const { port } = new URL(url);
  const busyPort = await runProcess({ DATA_DIR: join(folder, 'other'), PORT: port }, 'server/index.ts');
  expect([busyPort.code, busyPort.output]).toEqual([
    1,
    `Port ${port} is in use. Stop what uses it, or set PORT to another.\n`,
  ]);
  const busyFolder = await runProcess({ DATA_DIR: dataDir }, 'server/index.ts');
  expect([busyFolder.code, busyFolder.output]).toEqual([
    1,
    expect.stringContaining('is in use by a running Swaymark server'),
  ]);
});

test('a damaged database is told in words, with what to do, and restoring a backup does it', async () => {
  await start();
  const file = join(folder, 'copy.sqlite3');
  await runProcess({ DATA_DIR: dataDir }, 'server/cli/backup.ts', [file]);
  await end('SIGTERM');
  writeFileSync(join(dataDir, 'swaymark.sqlite3'), 'this is a text and was never a database '.repeat(200));
  const { code, output } = await runProcess({ DATA_DIR: dataDir }, 'server/index.ts');
  expect(code).toBe(1);
  expect(output).toMatch(/^A database in .* is damaged \(SQLITE_NOTADB\)\. Put a backup in its place/);
  expect(output).not.toMatch(/\.ts:|node_modules/);
  const restored = await runProcess({ DATA_DIR: dataDir }, 'server/cli/restore.ts', [file]);
  expect([restored.code, restored.output]).toEqual([0, expect.stringMatching(/signs in again(.|\n)*is kept as/)]);
  await start();
});

test('the last coordinator gets a one-time link from the command line, with the server stopped', async () => {
  const ask = (email: string) => runProcess({ DATA_DIR: dataDir }, 'server/cli/resetLink.ts', [email]);
  await setUp((await start()).setUpToken!);
  expect(await ask('lead@example.org')).toMatchObject({
    code: 1,
    output: expect.stringMatching(/in use by a running Swaymark server\. Stop it first/) as string,
  });
  await end('SIGTERM');
  expect(await ask('other@example.org')).toMatchObject({ code: 1, output: expect.stringMatching(/^No account/) });
  expect(await ask('lead')).toMatchObject({ code: 2, output: expect.stringMatching(/^Name the e-mail/) });
  const { code, output } = await ask(' Lead@example.org');
  expect(code).toBe(0);
  const token = /http:\/\/localhost:\d+\/reset\/([\w-]+)\n$/.exec(output)![1]!;
  const client = createApiClient((await start()).url);
  const password = 'eleven quiet pendulums';
  must(await client.post('/api/password/reset', { token, password }));
  must(await client.post('/api/sign-in', { email: 'lead@example.org', password }));
  const again = await client.post('/api/password/reset', { token, password: 'twelve quiet pendulums' });
  expect(again.status).toBe(410);
});

test('a folder that cannot be made is told in words', async () => {
  writeFileSync(join(folder, 'file'), '');
  const { code, output } = await runProcess({ DATA_DIR: join(folder, 'file', 'data') }, 'server/index.ts');
  expect([code, output]).toEqual([
    1,
    expect.stringMatching(/^The server cannot write in .* \(ENOTDIR\)\. Give its user/),
  ]);
});

// The system lets root write everywhere.
test.skipIf(process.getuid?.() === 0)('a folder that may only be read is told in words', async () => {
  await start();
  await end('SIGTERM');
  chmodSync(dataDir, 0o500);
  const { code, output } = await runProcess({ DATA_DIR: dataDir }, 'server/index.ts');
  chmodSync(dataDir, 0o700);
  expect([code, output]).toEqual([1, expect.stringMatching(/^The server cannot write in .*\. Give its user/)]);
});

test('no other user of the machine can read the database, its journal, a backup or a restored database', async () => {
  const before = process.umask(0o022);
  await start();
  process.umask(before);
  const file = join(folder, 'copy.sqlite3');
  await runProcess({ DATA_DIR: dataDir }, 'server/cli/backup.ts', [file]);
  const modes = () => [dataDir, ...readdirSync(dataDir).map((name) => join(dataDir, name)), file].map(modeOf);
  expect(readdirSync(dataDir)).toContain('swaymark.sqlite3-wal');
  expect(modes().filter((mode) => mode & 0o077)).toEqual([]);
  await end('SIGTERM');
  chmodSync(file, 0o644);
  await runProcess({ DATA_DIR: dataDir }, 'server/cli/restore.ts', [file]);
  expect(modeOf(join(dataDir, 'swaymark.sqlite3'))).toBe(0o600);
});
const modeOf = (path: string) => statSync(path).mode & 0o777;

test('the demo prints its doors, holds runs of every kind, and leaves nothing behind', async () => {
  running = await startProcess({ TMPDIR: folder }, 'server/cli/demo.ts');
  const output = running.output();
  const [, code, bench, nickname, pin] = /code (\w{6})\s+bench (\d)\s+(\w+)\s+PIN (\d{6})/.exec(output)!;
  const student = createApiClient(running.url);
  must(await student.post('/api/return', { code, bench: Number(bench), nickname, pin }));
  const [, password] = /password for all: (.+)\n/.exec(output)!;
  const lead = createApiClient(running.url);
  must(await lead.post('/api/sign-in', { email: 'coordinator@example.org', password }));
  const { items } = must(await lead.get('/api/feed'));
  const runs = items
    .filter((item: { type: string }) => item.type === 'run')
    .map((item: { raw: string }) => JSON.parse(item.raw));
  expect(runs.length).toBeGreaterThanOrEqual(12);
  expect(new Set(runs.map((run: { capture: { kind: string } }) => run.capture.kind))).toEqual(
    new Set(['tap', 'keyed_total', 'keyed_splits', 'gate']),
  );
  const flags = items.flatMap((item: { analysis?: { flags: { code: string }[] } }) => item.analysis?.flags ?? []);
  expect(new Set(flags.map((flag: { code: string }) => flag.code))).toEqual(
    new Set(['double', 'missed', 'half_swings', 'count_from_one', 'cut_short']),
  );
  const [, pass] = /\/board\/([\w-]+)/.exec(output)!;
  const board = must(await createApiClient(running.url).get('/api/board', { headers: { 'X-Board-Pass': pass! } }));
  expect(board.points.length).toBeGreaterThan(4);
  const [, kept] = /kept in (.+)\/mail/.exec(output)!;
  expect(existsSync(kept!)).toBe(true);
  expect((await end('SIGTERM')).code).toBe(0);
  expect(existsSync(kept!)).toBe(false);
});

test('backup and restore as commands', async () => {
  await start();
  const file = join(folder, 'copy.sqlite3');
  const backup = await runProcess({ DATA_DIR: dataDir }, 'server/cli/backup.ts', [file]);
  expect([backup.code, backup.output]).toEqual([0, `Backup written and checked: ${file}\n`]);
  expect((await runProcess({ DATA_DIR: dataDir }, 'server/cli/backup.ts', [file])).code).toBe(2);
  expect((await runProcess({ DATA_DIR: dataDir }, 'server/cli/restore.ts', [file])).code).toBe(1);
  await end('SIGTERM');
  expect((await runProcess({ DATA_DIR: dataDir }, 'server/cli/restore.ts', [file])).code).toBe(0);
});
