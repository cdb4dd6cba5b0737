import { randomUUID } from 'node:crypto';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { startServer, type TestServer } from '../support/startServer';
import { createApiClient } from './helpers/apiClient';
import { must, PASSWORD, signInCoordinator, signInStaff, type SignedInClient } from './helpers/people';

let server: TestServer;
let coordinator: SignedInClient;
beforeEach(async () => {
  server = await startServer();
  coordinator = await signInCoordinator(server);
});
afterEach(() => server.stop());
const signIn = (email: string) => createApiClient(server.url).post('/api/sign-in', { email, password: PASSWORD });

test('people are listed by name with role and state, and no hash leaves the server', async () => {
  await signInStaff(server, coordinator, 'teacher', 'mira@example.org');
  await coordinator.post('/api/invites', { email: 'jo@example.org', role: 'volunteer' });
  const reply = await coordinator.get('/api/people');
  expect(reply.body.staff).toEqual([
    { id: coordinator.me.id, name: 'Lead', email: 'lead@example.org', role: 'coordinator', disabled: false },
    { id: expect.any(String), name: 'mira', email: 'mira@example.org', role: 'teacher', disabled: false },
  ]);
  expect(reply.body.invites).toMatchObject([{ email: 'jo@example.org', role: 'volunteer' }]);
  expect(reply.text).not.toContain('argon2');
});

test('disabling ends every sign-in at once and shuts the door; enabling opens it again', async () => {
  const mira = await signInStaff(server, coordinator, 'teacher', 'mira@example.org');
  must(await coordinator.post(`/api/people/${mira.me.id}/disable`));
  expect((await mira.get('/api/classes')).status).toBe(401);
  expect((await signIn('mira@example.org')).status).toBe(401);
  must(await coordinator.post(`/api/people/${mira.me.id}/enable`));
  expect((await mira.get('/api/classes')).status).toBe(401);
  expect((await signIn('mira@example.org')).status).toBe(200);
});

test('the last coordinator cannot be disabled, not even by two coordinators at once', async () => {
  const alone = await coordinator.post(`/api/people/${coordinator.me.id}/disable`);
  expect([alone.status, alone.body.error.code]).toEqual([409, 'last_coordinator']);
  const second = await signInStaff(server, coordinator, 'coordinator', 'second@example.org');
  const replies = await Promise.all([
    coordinator.post(`/api/people/${second.me.id}/disable`),
    second.post(`/api/people/${coordinator.me.id}/disable`),
  ]);
  expect(replies.map(({ status }) => status).sort()).not.toEqual([200, 200]);
  const { StaffAccount } = server.running.deps.database.models;
  expect(await StaffAccount.count({ where: { role: 'coordinator', disabled_ms: null } })).toBe(1);
});

test('an id nobody has is told as not here, one that is no id as bad input', async () => {
  expect((await coordinator.post(`/api/people/${randomUUID()}/disable`)).status).toBe(404);
  expect((await coordinator.post(`/api/people/${randomUUID()}/enable`)).status).toBe(404);
  expect((await coordinator.post('/api/people/42/disable')).body.error.fields[0].path).toBe('id');
});

test('a role that is none is refused with the roles there are', async () => {
  const reply = await coordinator.post('/api/invites', { email: 'a@example.org', role: 'student' });
  expect([reply.status, reply.body.error.fields[0].path]).toEqual([400, 'role']);
  expect(reply.body.error.message).toContain('volunteer, teacher, coordinator');
});
