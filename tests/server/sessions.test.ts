import { request as httpRequest, type IncomingMessage } from 'node:http';
import { once } from 'node:events';
import { existsSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import sqlite3 from 'sqlite3';
import { afterEach, expect, test } from 'vitest';
import { startServer, type TestServer } from '../support/startServer';
import { createApiClient } from './helpers/apiClient';
import { createSchool, must, PASSWORD } from './helpers/people';
import { batch, runItem } from './helpers/runs';

const DAY_MS = 86_400_000;
let server: TestServer;
afterEach(() => server.stop());

test('a slow request that ends after sign-out does not sign in again', async () => {
  server = await startServer();
  const { student } = await createSchool(server);
  const cookie = student.cookie;
  const content = JSON.stringify(batch([runItem()]));
  const slow = httpRequest(`${server.url}/api/sync`, {
    method: 'POST',
    headers: {
      Cookie: cookie,
      'X-Swaymark': '1',
      'Content-Type': 'application/json',
      'Content-Length': Buffer.byteLength(content),
    },
  });
  slow.write(content.slice(0, 100));
  await new Promise((resolve) => setTimeout(resolve, 100));
  must(await student.post('/api/sign-out'));
  slow.end(content.slice(100));
  const [answer] = (await once(slow, 'response')) as [IncomingMessage];
  answer.resume();
  expect(answer.statusCode).toBe(401);
  const again = createApiClient(server.url);
  again.cookie = cookie;
  expect((await again.get('/api/me')).body).toEqual({ me: null });
});

test('thirty requests racing a sign-out leave nobody signed in', async () => {
  server = await startServer();
  const { student } = await createSchool(server);
  const cookie = student.cookie;
  await Promise.all([
    ...Array.from({ length: 30 }, () => createWith(cookie).get('/api/feed')),
    createWith(cookie).post('/api/sign-out'),
    ...Array.from({ length: 30 }, () => createWith(cookie).post('/api/sync', batch([]))),
  ]);
  expect((await createWith(cookie).get('/api/feed')).status).toBe(401);
});

test.each([
  ['cut short', '{"cookie":{"origin'],
  ['no object', '42'],
  ['without a cookie', '{"signInId":"x"}'],
  ['with a sign-in of another type', '{"cookie":{"path":"/"},"signInId":{"$ne":null}}'],
])('a session row that is %s counts as nobody, and the server goes on', async (_what, damaged) => {
  server = await startServer();
  const { student } = await createSchool(server);
  const sessions = new sqlite3.Database(join(server.dataDir, 'sessions.sqlite3'));
  await new Promise<void>((resolve, reject) =>
    sessions.run('UPDATE sessions SET sess = ?', [damaged], (error) => (error ? reject(error) : resolve())),
  );
  await new Promise<void>((resolve) => sessions.close(() => resolve()));
  expect((await student.get('/api/me')).body).toEqual({ me: null });
  expect((await student.post('/api/sync', batch([]))).status).toBe(401);
  const back = await createApiClient(server.url).post('/api/sign-in', {
    email: 'mira@example.org',
    password: PASSWORD,
  });
  expect(back.status).toBe(200);
});

test('signing in gives a new session id and ends the sign-in this device had', async () => {
  server = await startServer();
  const { student } = await createSchool(server);
  const before = student.cookie;
  must(await student.post('/api/sign-in', { email: 'mira@example.org', password: PASSWORD }));
  expect(student.cookie).not.toBe(before);
  expect((await createWith(before).get('/api/me')).body).toEqual({ me: null });
});

test('a sign-in outlives a restart of the server', async () => {
  server = await startServer();
  const { student } = await createSchool(server);
  const { dataDir } = server;
  await server.running.stop();
  const second = await startServer({ dataDir });
  const client = createApiClient(second.url);
  client.cookie = student.cookie;
  expect((await client.get('/api/me')).body.me.nickname).toBe('Otter');
  await second.stop();
});

test.each([
  ['a student', 'student', 30, 90],
  ['staff', 'teacher', 14, 30],
] as const)(
  '%s is signed out after so many idle days, and after so many days in all',
  async (_who, kind, idle, most) => {
    let later = 0;
    server = await startServer({}, () => Date.now() + later);
    const client = (await createSchool(server))[kind];
    const isIn = async () => (await client.get('/api/me')).body.me !== null;
    for (let day = 0; day < most; day += idle - 1) {
      later = day * DAY_MS;
      expect(await isIn()).toBe(true);
    }
    later = most * DAY_MS + 60_000;
    expect(await isIn()).toBe(false);
  },
);

test('a sign-in that was idle too long is gone', async () => {
  let later = 0;
  server = await startServer({}, () => Date.now() + later);
  const { student } = await createSchool(server);
  later = 30 * DAY_MS + 60_000;
  expect((await student.get('/api/me')).body.me).toBeNull();
});

test('the cookie is for this server alone: HttpOnly, SameSite=Lax, and over https __Host- and Secure', async () => {
  server = await startServer({ isHttps: true, trustProxyHops: 1 });
  const token = await server.setUpToken();
  const wanted = { token, name: 'Lead', email: 'lead@example.org', password: PASSWORD };
  const reply = await createApiClient(server.url).post('/api/set-up', wanted, {
    headers: { 'X-Forwarded-Proto': 'https' },
  });
  const [cookie] = reply.headers.getSetCookie();
  expect(cookie).toMatch(/^__Host-swaymark=/);
  expect(cookie).toMatch(/; Path=\/; Expires=[^;]+; HttpOnly; Secure; SameSite=Lax$/);
});

test('with a new secret before the old one, who is signed in stays so', async () => {
  const [newer, older] = ['n'.repeat(32), 'o'.repeat(32)];
  server = await startServer({ sessionSecrets: [older] });
  const { student } = await createSchool(server);
  const { dataDir } = server;
  await server.running.stop();
  const isIn = async (sessionSecrets: string[]) => {
    const other = await startServer({ dataDir, sessionSecrets });
    const client = createApiClient(other.url);
    client.cookie = student.cookie;
    const { me } = (await client.get('/api/me')).body;
    await other.stop();
    return me !== null;
  };
  expect(await isIn([newer, older])).toBe(true);
  expect(await isIn([newer])).toBe(false);
});

test.each(['', '\n', 'half a secret'])('a secret file that holds %j is made anew', async (left) => {
  server = await startServer();
  const { dataDir } = server;
  await server.running.stop();
  const file = join(dataDir, 'session-secret');
  writeFileSync(file, left);
  const second = await startServer({ dataDir });
  expect(readFileSync(file, 'utf8')).toMatch(/^[\w-]{64}$/);
  expect(statSync(file).mode & 0o077).toBe(0);
  expect(existsSync(`${file}.part`)).toBe(false);
  await second.stop();
});

test('session file and secret are for the server’s user alone', async () => {
  server = await startServer();
  for (const name of ['sessions.sqlite3', 'session-secret']) {
    expect(statSync(join(server.dataDir, name)).mode & 0o077).toBe(0);
  }
});

function createWith(cookie: string) {
  const client = createApiClient(server.url);
  client.cookie = cookie;
  return client;
}
