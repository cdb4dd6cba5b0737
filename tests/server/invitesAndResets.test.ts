import { randomUUID } from 'node:crypto';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { startServer, type TestServer } from '../support/startServer';
import { createApiClient } from './helpers/apiClient';
import { PASSWORD, signInCoordinator, signInStaff, tokenIn, type SignedInClient } from './helpers/people';

const MINUTE_MS = 60_000;
const DAY_MS = 24 * 60 * MINUTE_MS;
let server: TestServer;
let coordinator: SignedInClient;
let later = 0;
beforeEach(async () => {
  later = 0;
  server = await startServer({}, () => Date.now() + later);
  coordinator = await signInCoordinator(server);
});
afterEach(() => server.stop());
const guest = () => createApiClient(server.url);
const accept = (token: string) => guest().post('/api/invites/accept', { token, name: 'Mira', password: PASSWORD });

/** The last mail, once that many have come. */
async function mailNumber(count: number): Promise<string> {
  await expect.poll(async () => (await server.mails()).length).toBe(count);
  return (await server.mails()).at(-1)!;
}

test('an invitation goes out by SMTP, names the role and lets the person in once', async () => {
  const reply = await coordinator.post('/api/invites', { email: 'mira@example.org', role: 'teacher' });
  expect(reply.body).toMatchObject({ invite: { email: 'mira@example.org', role: 'teacher' }, link: null });
  const mail = await mailNumber(1);
  expect(mail).toMatch(/^To: mira@example\.org/m);
  expect(mail).toContain('as teacher');
  const token = tokenIn(mail, 'invite');
  expect((await accept(token)).body.me).toMatchObject({ kind: 'teacher', email: 'mira@example.org' });
  expect((await accept(token)).body.error.code).toBe('link_used_up');
});

test('an invitation runs out after seven days', async () => {
  await coordinator.post('/api/invites', { email: 'mira@example.org', role: 'teacher' });
  const token = tokenIn(await mailNumber(1), 'invite');
  later = 7 * DAY_MS + 1;
  expect((await accept(token)).status).toBe(410);
  later = 7 * DAY_MS - MINUTE_MS;
  expect((await accept(token)).status).toBe(200);
});

test('an invitation that was taken back, or sent anew, opens nothing', async () => {
  const first = await coordinator.post('/api/invites', { email: 'mira@example.org', role: 'teacher' });
  const firstToken = tokenIn(await mailNumber(1), 'invite');
  await coordinator.post('/api/invites', { email: 'mira@example.org', role: 'volunteer' });
  const secondToken = tokenIn(await mailNumber(2), 'invite');
  expect((await accept(firstToken)).status).toBe(410);
  const open = (await coordinator.get('/api/people')).body.invites;
  expect(open).toHaveLength(1);
  expect((await coordinator.delete(`/api/invites/${first.body.invite.id}`)).status).toBe(404);
  expect((await coordinator.delete(`/api/invites/${open[0].id}`)).body).toEqual({ done: true });
  expect((await accept(secondToken)).status).toBe(410);
});

test('nobody is invited who has an account', async () => {
  const reply = await coordinator.post('/api/invites', { email: 'LEAD@example.org', role: 'teacher' });
  expect([reply.status, reply.body.error.code]).toEqual([409, 'already_staff']);
});

test('a GET of the link, as mail scanners do, does not use it up', async () => {
  await coordinator.post('/api/invites', { email: 'mira@example.org', role: 'teacher' });
  const token = tokenIn(await mailNumber(1), 'invite');
  await guest().get(`/invite/${token}`);
  await guest().get('/api/me');
  expect((await accept(token)).status).toBe(200);
});

test('without e-mail the coordinator is given the link to pass on', async () => {
  const other = await startServer({ mail: { kind: 'none' } });
  const lead = await signInCoordinator(other);
  const reply = await lead.post('/api/invites', { email: 'mira@example.org', role: 'teacher' });
  expect(reply.body.link).toMatch(new RegExp(`^http://localhost:\\d+/invite/[\\w-]{43}$`));
  await other.stop();
});

test('a mail server that takes nothing is told, and no invitation stays behind', async () => {
  const other = await startServer({ mail: { kind: 'smtp', url: 'smtp://127.0.0.1:9', from: 'a@example.org' } });
  const lead = await signInCoordinator(other);
  const reply = await lead.post('/api/invites', { email: 'mira@example.org', role: 'teacher' });
  expect([reply.status, reply.body.error.code]).toEqual([502, 'mail_not_sent']);
  expect((await lead.get('/api/people')).body.invites).toEqual([]);
  await other.stop();
});

test('a reset link sets a new password once and signs the account out everywhere', async () => {
  const mira = await signInStaff(server, coordinator, 'teacher', 'mira@example.org');
  expect((await guest().post('/api/password/forgot', { email: 'mira@example.org' })).body).toEqual({ done: true });
  const token = tokenIn(await mailNumber(2), 'reset');
  const reset = () => guest().post('/api/password/reset', { token, password: 'nine slow swings' });
  expect((await reset()).body).toEqual({ done: true });
  expect((await reset()).status).toBe(410);
  expect((await mira.get('/api/classes')).status).toBe(401);
  const signIn = (password: string) => guest().post('/api/sign-in', { email: 'mira@example.org', password });
  expect((await signIn(PASSWORD)).status).toBe(401);
  expect((await signIn('nine slow swings')).status).toBe(200);
});

test('a second reset link leaves the first good; once one is used the other opens nothing', async () => {
  const forgot = () => guest().post('/api/password/forgot', { email: 'lead@example.org' });
  await forgot();
  const first = tokenIn(await mailNumber(1), 'reset');
  await forgot();
  const second = tokenIn(await mailNumber(2), 'reset');
  const reset = (token: string) => guest().post('/api/password/reset', { token, password: 'nine slow swings' });
  expect((await reset(first)).status).toBe(200);
  expect((await reset(second)).status).toBe(410);
});

test('an invitation and a reset refuse the person’s own address as password, and the link stays good', async () => {
  const email = 'mira.bracken@example.org';
  await coordinator.post('/api/invites', { email, role: 'teacher' });
  const token = tokenIn(await mailNumber(1), 'invite');
  const own = await guest().post('/api/invites/accept', { token, name: 'Mira', password: email });
  expect([own.status, own.body.error.fields[0].path]).toEqual([400, 'password']);
  expect((await accept(token)).status).toBe(200);
  await guest().post('/api/password/forgot', { email });
  const reset = { token: tokenIn(await mailNumber(2), 'reset'), password: 'Mira.Bracken@example.org' };
  expect((await guest().post('/api/password/reset', reset)).status).toBe(400);
});

test('a coordinator who was shut out does not come back by an invitation they made', async () => {
  const second = await signInStaff(server, coordinator, 'coordinator', 'second@example.org');
  await second.post('/api/invites', { email: 'back@example.org', role: 'coordinator' });
  const theirs = tokenIn(await mailNumber(2), 'invite');
  await coordinator.post('/api/invites', { email: 'mira@example.org', role: 'teacher' });
  const others = tokenIn(await mailNumber(3), 'invite');
  await coordinator.post(`/api/people/${second.me.id}/disable`);
  expect((await accept(theirs)).status).toBe(410);
  expect((await accept(others)).status).toBe(200);
});

test('an invitation that waits to be written while its inviter is shut out is not made', async () => {
  const second = await signInStaff(server, coordinator, 'coordinator', 'second@example.org');
  const { database, now } = server.running.deps;
  let shut = () => {};
  const shutting = database.writeTransaction(async (transaction) => {
    await new Promise<void>((resolve) => (shut = resolve));
    await database.models.StaffAccount.update({ disabled_ms: now() }, { where: { id: second.me.id }, transaction });
  });
  const late = second.post('/api/invites', { email: 'back@example.org', role: 'coordinator' });
  await new Promise((resolve) => setTimeout(resolve, 100));
  shut();
  await shutting;
  expect((await late).status).toBe(401);
  expect((await coordinator.get('/api/people')).body.invites).toEqual([]);
});

test('a coordinator mails a colleague a reset link, which is written down', async () => {
  const mira = await signInStaff(server, coordinator, 'teacher', 'mira@example.org');
  expect((await coordinator.post(`/api/people/${mira.me.id}/reset-link`)).body).toEqual({ link: null });
  const mail = await mailNumber(2);
  expect(mail).toMatch(/^To: mira@example\.org/m);
  const token = tokenIn(mail, 'reset');
  expect((await guest().post('/api/password/reset', { token, password: 'nine slow swings' })).status).toBe(200);
  const entry = await server.running.deps.database.models.ActivityEntry.findOne({
    where: { action: 'people.reset_link', subject: mira.me.id },
  });
  expect(entry?.actor_id).toBe(coordinator.me.id);
});

test('without e-mail the coordinator is given the reset link once, and none for an account that is shut', async () => {
  const other = await startServer({ mail: { kind: 'none' } });
  const lead = await signInCoordinator(other);
  const { link } = (await lead.post('/api/invites', { email: 'mira@example.org', role: 'teacher' })).body;
  const mira = createApiClient(other.url);
  const invite = { token: link.split('/').at(-1), name: 'Mira', password: PASSWORD };
  const { me } = (await mira.post('/api/invites/accept', invite)).body;
  const given = await lead.post(`/api/people/${me.id}/reset-link`);
  const reset = { token: given.body.link.split('/reset/')[1], password: 'nine slow swings' };
  expect((await mira.post('/api/password/reset', reset)).body).toEqual({ done: true });
  expect((await lead.post(`/api/people/${randomUUID()}/reset-link`)).status).toBe(404);
  await lead.post(`/api/people/${me.id}/disable`);
  const shut = await lead.post(`/api/people/${me.id}/reset-link`);
  expect([shut.status, shut.body.error.code]).toEqual([409, 'account_shut']);
  await other.stop();
});

test('a reset link runs out after half an hour', async () => {
  await guest().post('/api/password/forgot', { email: 'lead@example.org' });
  const token = tokenIn(await mailNumber(1), 'reset');
  later = 31 * MINUTE_MS;
  expect((await guest().post('/api/password/reset', { token, password: 'nine slow swings' })).status).toBe(410);
});

test('forgot answers the same for an address nobody has, and sends nothing', async () => {
  const unknown = await guest().post('/api/password/forgot', { email: 'nobody@example.org' });
  const known = await guest().post('/api/password/forgot', { email: 'lead@example.org' });
  expect([unknown.status, unknown.body]).toEqual([known.status, known.body]);
  await mailNumber(1);
  await server.running.deps.background.settled();
  expect(await server.mails()).toHaveLength(1);
});

test('a link cut short when it was copied is told as that', async () => {
  const reply = await accept('abc');
  expect(reply.body.error.fields[0]).toEqual({ path: 'token', message: 'this link is not whole: copy all of it' });
});
