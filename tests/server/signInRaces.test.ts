import { join } from 'node:path';
import argon2 from 'argon2';
import sqlite3 from 'sqlite3';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { startServer, type TestServer } from '../support/startServer';
import { createApiClient } from './helpers/apiClient';
import { createSchool, must, PASSWORD, tokenIn, type School } from './helpers/people';

/** What was proven before a change must not open a door after it, however long the hash waited its turn. */
let server: TestServer;
let school: School;
beforeEach(async () => {
  server = await startServer();
  school = await createSchool(server);
});
afterEach(() => server.stop());

const guest = () => createApiClient(server.url);
const signIn = (password = PASSWORD) => guest().post('/api/sign-in', { email: 'mira@example.org', password });
/** So many hashes in front of whoever comes next. */
const fillLine = (hashes: number) =>
  Promise.all(Array.from({ length: hashes }, () => server.running.deps.hasher.hash('one of many')));
/** Long enough for a request to have read its row and stand in line, well short of the line itself. */
const untilInLine = () => new Promise((resolve) => setTimeout(resolve, 60));

test('a sign-in that waits while the account is shut does not come in', async () => {
  const line = fillLine(40);
  const late = signIn();
  await untilInLine();
  must(await school.coordinator.post(`/api/people/${school.teacher.me.id}/disable`));
  expect([(await late).status, (await late).body.error.code]).toEqual([401, 'password_not_matched']);
  must(await school.coordinator.post(`/api/people/${school.teacher.me.id}/enable`));
  expect((await signIn()).status).toBe(200);
  await line;
});

test('a sign-in with the old password that waits while a new one is set does not come in', async () => {
  await guest().post('/api/password/forgot', { email: 'mira@example.org' });
  await server.running.deps.background.settled();
  const token = tokenIn((await server.mails()).at(-1)!, 'reset');
  const line = [fillLine(30)];
  const reset = guest().post('/api/password/reset', { token, password: 'nine slow swings' });
  await untilInLine();
  line.push(fillLine(20));
  const late = signIn();
  expect((await reset).status).toBe(200);
  expect((await late).status).toBe(401);
  await Promise.all(line);
});

test('a return with the old PIN that waits while a new one is given does not come in', async () => {
  const { ownClass, student } = school;
  const line = [fillLine(30)];
  const renewed = school.teacher.post(`/api/students/${student.me.id}/new-pin`);
  await untilInLine();
  line.push(fillLine(20));
  const { pin, nickname, bench } = student;
  const late = guest().post('/api/return', { code: ownClass.code, bench, nickname, pin });
  expect(must(await renewed).pin).not.toBe(pin);
  expect([(await late).status, (await late).body.error.code]).toEqual([401, 'pin_not_matched']);
  await Promise.all(line);
});

test('a hash made with weaker settings is made anew at the next sign-in', async () => {
  const { StaffAccount } = server.running.deps.database.models;
  const weaker = await argon2.hash(PASSWORD, { type: argon2.argon2id, memoryCost: 8 * 1024, timeCost: 1 });
  await StaffAccount.update({ password_hash: weaker }, { where: { email: 'mira@example.org' } });
  expect((await signIn()).status).toBe(200);
  const { password_hash } = (await StaffAccount.findOne({ where: { email: 'mira@example.org' } }))!;
  expect(password_hash).not.toBe(weaker);
  expect((await signIn()).status).toBe(200);
});

test('a password set while a weaker hash is being made anew stays', async () => {
  const { hasher, database } = server.running.deps;
  const { StaffAccount } = database.models;
  const where = { email: 'mira@example.org' };
  const weaker = await argon2.hash(PASSWORD, { type: argon2.argon2id, memoryCost: 8 * 1024, timeCost: 1 });
  await StaffAccount.update({ password_hash: weaker }, { where });
  const chosen = await hasher.hash('nine slow swings');
  const line = fillLine(40);
  const late = signIn();
  await untilInLine();
  await database.writeTransaction((transaction) =>
    StaffAccount.update({ password_hash: chosen }, { where, transaction }),
  );
  expect((await late).status).toBe(401);
  expect((await StaffAccount.findOne({ where }))!.password_hash).toBe(chosen);
  await line;
});

test('a session that could not be kept is told as that, not as nothing done', async () => {
  const sessions = new sqlite3.Database(join(server.dataDir, 'sessions.sqlite3'));
  await new Promise<void>((resolve) => sessions.run('DROP TABLE sessions', () => resolve()));
  await new Promise<void>((resolve) => sessions.close(() => resolve()));
  const reply = await signIn();
  expect([reply.status, reply.body.error.code]).toEqual([503, 'sign_in_not_kept']);
  expect(reply.body.error.message).toContain('could not keep the sign-in');
});
