import { randomUUID } from 'node:crypto';
import { afterEach, expect, test } from 'vitest';
import type { Config } from '../../server/config';
import { RATE_LIMITS } from '../../server/rateLimits';
import { startServer, type TestServer } from '../support/startServer';
import { createApiClient } from './helpers/apiClient';
import { createClass, createSchool, joinStudent, must, PASSWORD } from './helpers/people';

const MINUTE_MS = 60_000;
let server: TestServer;
let later = 0;
afterEach(() => server.stop());
const start = async (limits: Partial<typeof RATE_LIMITS>, config: Partial<Config> = {}) => {
  later = 0;
  server = await startServer({ ...config, rateLimits: { ...RATE_LIMITS, ...limits } }, () => Date.now() + later);
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

test('one forgotten PIN holds back nobody else behind the same address', async () => {
  const { ownClass, student } = await start({ failedPerAccount: 3, failedPerAddress: 4 });
  const wrong = student.pin === '000000' ? '111111' : '000000';
  const comeBack = (pin: string, nickname = 'Otter') =>
    guest().post('/api/return', { code: ownClass.code, bench: 1, nickname, pin });
  const replies = [];
  for (let i = 0; i < 12; i += 1) replies.push((await comeBack(wrong)).status);
  expect(replies).toEqual([401, 401, 401, ...Array<number>(9).fill(429)]);
  const mate = await joinStudent(server, ownClass.code, 1, 'Newt');
  expect((await comeBack(mate.pin, 'Newt')).status).toBe(200);
  expect((await signIn(PASSWORD)).status).toBe(200);
});

test('with a new PIN a student who had used up the tries comes back at once', async () => {
  const { ownClass, student, teacher } = await start({ failedPerAccount: 2 });
  const comeBack = (pin: string) =>
    guest().post('/api/return', { code: ownClass.code, bench: 1, nickname: 'Otter', pin });
  const wrong = student.pin === '000000' ? '111111' : '000000';
  for (const status of [401, 401, 429]) expect((await comeBack(wrong)).status).toBe(status);
  const { pin } = must(await teacher.post(`/api/students/${student.me.id}/new-pin`));
  expect((await comeBack(pin)).status).toBe(200);
});

test('wrong passwords from one address do not shut the account out elsewhere, until very many came', async () => {
  await start({ failedPerAccount: 2, failedPerAccountAnywhere: 5 }, { trustProxyHops: 1 });
  const from = (address: string, password: string) =>
    guest().post('/api/sign-in', { email: 'mira@example.org', password }, { headers: { 'X-Forwarded-For': address } });
  for (const status of [401, 401, 429]) expect((await from('192.0.2.1', 'not the password')).status).toBe(status);
  expect((await from('198.51.100.7', PASSWORD)).status).toBe(200);
  for (const status of [401, 401, 429]) expect((await from('192.0.2.2', 'not the password')).status).toBe(status);
  expect((await from('192.0.2.3', 'not the password')).status).toBe(401);
  expect((await from('198.51.100.7', PASSWORD)).status).toBe(429);
});

test('130 good joins at one moment from one address all come in', async () => {
  const { teacher } = await start({});
  const classes = await Promise.all([1, 2, 3].map((n) => createClass(teacher, `Physics ${n}`)));
  const students = await Promise.all(
    Array.from({ length: 130 }, (_, i) => joinStudent(server, classes[i % 3]!.code, 1 + (i % 40), `Student ${i}`)),
  );
  expect(new Set(students.map(({ me }) => me.id)).size).toBe(130);
}, 120_000);

test('of many wrong codes at one moment those over the limit are not told they were wrong', async () => {
  await start({ failedPerAddress: 4 });
  const letters = 'BCDFGHJKMP';
  const replies = await Promise.all(
    [...letters].map((letter) => guest().post('/api/classes/look-up', { code: letter.repeat(6) })),
  );
  expect(replies.filter(({ status }) => status === 404)).toHaveLength(4);
});

test('tries that wait for their answer at one moment are bounded', async () => {
  await start({ triesAtOnce: 2 });
  const replies = await Promise.all(Array.from({ length: 12 }, (_, i) => signIn(PASSWORD, `n${i}@example.org`)));
  const statuses = replies.map(({ status }) => status);
  expect(statuses.filter((status) => status === 429).length).toBeGreaterThan(0);
  expect(statuses.filter((status) => status === 401).length).toBeGreaterThanOrEqual(2);
  expect((await signIn(PASSWORD)).status).toBe(200);
});

test('with the clock set back nobody waits longer than one window', async () => {
  await start({ failedPerAccount: 2 });
  later = 40 * 24 * 60 * MINUTE_MS;
  for (const status of [401, 401, 429]) expect((await signIn('not the password')).status).toBe(status);
  later = 0;
  expect((await signIn(PASSWORD)).status).toBe(200);
});

test('one phone that asks without end is held back, the rest of the school is not', async () => {
  const { student, teacher } = await start({ requestsPerSignIn: 30, requestsPerAddress: 100 });
  const replies = await Promise.all(Array.from({ length: 40 }, () => student.get('/api/me')));
  const over = replies.filter(({ status }) => status === 429);
  expect(over.length).toBeGreaterThanOrEqual(10);
  expect(over[0]!.body.error).toMatchObject({ code: 'too_many_requests', message: expect.stringContaining('sign-in') });
  expect((await teacher.get('/api/me')).status).toBe(200);
  expect((await guest().get('/api/me')).status).toBe(200);
});

test('requests with no sign-in are limited by address, but for whether the server is well', async () => {
  await start({ requestsPerAddress: 30 });
  const replies = await Promise.all(Array.from({ length: 40 }, () => guest().get('/api/me')));
  expect(replies.filter(({ status }) => status === 429).length).toBeGreaterThanOrEqual(10);
  expect((await guest().get('/api/health')).status).toBe(200);
});

test('a class is joined only so often from one address, and the rest of the class and other classes come in', async () => {
  const { teacher } = await start({ joinsPerClass: 3 }, { trustProxyHops: 1 });
  const [mine, other] = [await createClass(teacher), await createClass(teacher)];
  let people = 0;
  const joinFrom = async (address: string, code: string, nickname = `Student ${(people += 1)}`) => {
    const body = { join_id: randomUUID(), code, bench: 1, nickname };
    return (await guest().post('/api/join', body, { headers: { 'X-Forwarded-For': address } })).status;
  };
  expect(await joinFrom('192.0.2.1', mine.code, 'Otter')).toBe(200);
  expect(await joinFrom('192.0.2.1', mine.code, 'Otter')).toBe(409);
  for (const status of [200, 200, 429]) expect(await joinFrom('192.0.2.1', mine.code)).toBe(status);
  expect(await joinFrom('198.51.100.7', mine.code)).toBe(200);
  expect(await joinFrom('192.0.2.1', other.code)).toBe(200);
  later = 16 * MINUTE_MS;
  expect(await joinFrom('192.0.2.1', mine.code)).toBe(200);
});
