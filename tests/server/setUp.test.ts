import { afterEach, beforeEach, expect, test } from 'vitest';
import { startServer, type TestServer } from '../support/startServer';
import { createApiClient } from './helpers/apiClient';
import { PASSWORD } from './helpers/people';

let server: TestServer;
beforeEach(async () => {
  server = await startServer();
});
afterEach(() => server.stop());
const wanted = { name: 'Lead', email: 'lead@example.org', password: PASSWORD };
const setUp = (token: string, change = {}) =>
  createApiClient(server.url).post('/api/set-up', { token, ...wanted, ...change });

test('the set-up link makes the first coordinator, once', async () => {
  const token = await server.setUpToken();
  expect((await setUp(token)).body.me).toMatchObject({ kind: 'coordinator', name: 'Lead', email: 'lead@example.org' });
  const again = await setUp(token, { email: 'second@example.org' });
  expect([again.status, again.body.error.code]).toEqual([410, 'link_used_up']);
});

test('of two at once with one link, one gets in', async () => {
  const token = await server.setUpToken();
  const replies = await Promise.all([setUp(token), setUp(token, { email: 'second@example.org' })]);
  expect(replies.map(({ status }) => status).sort()).toEqual([200, 410]);
});

test('a newer link takes the place of an earlier one', async () => {
  const first = await server.setUpToken();
  const second = await server.setUpToken();
  expect((await setUp(first)).status).toBe(410);
  expect((await setUp(second)).status).toBe(200);
});

test('the database does not hold the token', async () => {
  const token = await server.setUpToken();
  const rows = await server.running.deps.database.models.StaffToken.findAll();
  expect(JSON.stringify(rows)).not.toContain(token);
});

test.each([
  ['eleven characters', 'seven brass'],
  ['one of the first that are tried', 'Password1234!'],
  ['a walk along the keys', 'qwertyuiopas'],
  ['the same few characters again', 'abcabcabcabc'],
  ['the own e-mail address', 'lead@example.org'],
])('a password is refused that is %s', async (_why, password) => {
  const token = await server.setUpToken();
  const reply = await setUp(token, { password });
  expect([reply.status, reply.body.error.fields[0].path]).toEqual([400, 'password']);
  expect((await setUp(token)).status).toBe(200);
});

test('a password of 128 characters in any script is taken', async () => {
  const password = 'ö🦊 '.repeat(32).slice(0, 128);
  const token = await server.setUpToken();
  expect((await setUp(token, { password: `x${password}`.slice(0, 128) })).status).toBe(200);
});
