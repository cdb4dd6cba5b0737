import { afterEach, expect, test } from 'vitest';
import { RATE_LIMITS } from '../../server/rateLimits';
import { startServer, type TestServer } from '../support/startServer';
import { createApiClient } from './helpers/apiClient';
import { createClass, createSchool, joinStudent, PASSWORD } from './helpers/people';

const MINUTE_MS = 60_000;
let server: TestServer;
let later = 0;
afterEach(() => server.stop());
const start = async (limits: Partial<typeof RATE_LIMITS>) => {
  later = 0;
  server = await startServer({ rateLimits: { ...RATE_LIMITS, ...limits } }, () => Date.now() + later);
  return createSchool(server);
};
const guest = () => createApiClient(server.url);
const signIn = (password: string, email = 'mira@example.org') => guest().post('/api/sign-in', { email, password });

test('after so many wrong passwords the account waits, even for the right one, and then opens again', async () => {
  await start({ failedPerAccount: 3 });
  for (let i = 0; i < 3; i += 1) expect((await signIn('not the password')).status).toBe(401);
  const locked = await signIn(PASSWORD);
  expect([locked.status, locked.body.error.code]).toEqual([429, 'too_many_tries']);
  expect(Number(locked.headers.get('Retry-After'))).toBeGreaterThan(60);
  expect((await signIn(PASSWORD, 'noor@example.org')).status).toBe(200);
  later = 16 * MINUTE_MS;
  expect((await signIn(PASSWORD)).status).toBe(200);
});

test('many wrong passwords at once do not slip through', async () => {
  await start({ failedPerAccount: 3 });
  const replies = await Promise.all(Array.from({ length: 10 }, () => signIn('not the password')));
  expect(replies.filter(({ status }) => status === 401)).toHaveLength(3);
});

test('right ones are not counted', async () => {
  await start({ failedPerAccount: 3 });
  for (let i = 0; i < 6; i += 1) expect((await signIn(PASSWORD)).status).toBe(200);
});

test('a PIN can be tried only so often, by whichever spelling of the nickname', async () => {
  const { ownClass, student } = await start({ failedPerAccount: 3 });
  const wrong = student.pin === '000000' ? '111111' : '000000';
  const comeBack = (nickname: string, pin: string) =>
    guest().post('/api/return', { code: ownClass.code, bench: 1, nickname, pin });
  for (const nickname of ['Otter', 'OTTER', ' otter']) expect((await comeBack(nickname, wrong)).status).toBe(401);
  expect((await comeBack('Otter', student.pin)).status).toBe(429);
});

test('class codes and links can be guessed only so often from one address, while a class goes on joining', async () => {
  const { ownClass, teacher } = await start({ failedPerAddress: 4 });
  const look = (code: string) => guest().post('/api/classes/look-up', { code });
  const token = 'x'.repeat(43);
  for (const code of ['BBBBBB', 'CCCCCC']) expect((await look(code)).status).toBe(404);
  const other = await createClass(teacher);
  for (let i = 0; i < 6; i += 1) await joinStudent(server, other.code, 1, `Student ${i}`);
  for (let i = 0; i < 2; i += 1) {
    expect((await guest().post('/api/password/reset', { token, password: PASSWORD })).status).toBe(410);
  }
  expect((await look(ownClass.code)).status).toBe(429);
});

test('reset mails are limited per address, the same for one nobody has', async () => {
  await start({ resetsPerAccount: 2 });
  const forgot = (email: string) => guest().post('/api/password/forgot', { email });
  for (const email of ['mira@example.org', 'nobody@example.org']) {
    expect([(await forgot(email)).status, (await forgot(email)).status, (await forgot(email)).status]).toEqual([
      200, 200, 429,
    ]);
  }
});

test('requests from one address are limited as a whole', async () => {
  await start({ requestsPerMinute: 30 });
  const replies = await Promise.all(Array.from({ length: 40 }, () => guest().get('/api/health')));
  const over = replies.filter(({ status }) => status === 429);
  expect(over.length).toBeGreaterThanOrEqual(10);
  expect(over[0]!.body.error.code).toBe('too_many_requests');
});
