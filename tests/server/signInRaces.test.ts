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
/** Holds back the next proof where it stands in line for its hash: its row has been read by then. */
function holdProof(): { inLine: Promise<void>; letGo: () => void } {
  const { hasher } = server.running.deps;
  const { verify } = hasher;
  let letGo = () => {};
  const held = new Promise<void>((resolve) => (letGo = resolve));
  const inLine = new Promise<void>((resolve) => {
    hasher.verify = async (hash, secret) => {
      hasher.verify = verify;
      resolve();
      await held;
      return verify(hash, secret);
    };
  });
  return { inLine, letGo };
}

test('a sign-in that waits while the account is shut does not come in', async () => {
  const { inLine, letGo } = holdProof();
  const late = signIn();
  await inLine;
  must(await school.coordinator.post(`/api/people/${school.teacher.me.id}/disable`));
  letGo();
  expect([(await late).status, (await late).body.error.code]).toEqual([401, 'password_not_matched']);
  must(await school.coordinator.post(`/api/people/${school.teacher.me.id}/enable`));
  expect((await signIn()).status).toBe(200);
});

test('a sign-in with the old password that waits while a new one is set does not come in', async () => {
  must(await school.coordinator.post(`/api/people/${school.teacher.me.id}/reset-link`));
  const token = tokenIn((await server.mails()).at(-1)!, 'reset');
  const { inLine, letGo } = holdProof();
  const late = signIn();
  await inLine;
  must(await guest().post('/api/password/reset', { token, password: 'nine slow swings' }));
  letGo();
  expect((await late).status).toBe(401);
});

test('a return with the old PIN that waits while a new one is given does not come in', async () => {
  const { ownClass, student } = school;
  const { pin, nickname, bench } = student;
  const { inLine, letGo } = holdProof();
  const late = guest().post('/api/return', { code: ownClass.code, bench, nickname, pin });
  await inLine;
  must(await school.teacher.post(`/api/students/${student.me.id}/new-pin`));
  letGo();
  expect([(await late).status, (await late).body.error.code]).toEqual([401, 'pin_not_matched']);
});

test('a hash made with weaker settings is made anew at the next sign-in', async () => {
  const weaker = await weakenHash();
  expect((await signIn()).status).toBe(200);
  expect(await keptHash()).not.toBe(weaker);
  expect((await signIn()).status).toBe(200);
});

test('a password set while a weaker hash is being made anew stays', async () => {
  await weakenHash();
  const chosen = await server.running.deps.hasher.hash('nine slow swings');
  const { inLine, letGo } = holdProof();
  const late = signIn();
  await inLine;
  await setHash(chosen);
  letGo();
  expect((await late).status).toBe(401);
  expect(await keptHash()).toBe(chosen);
});

test('a session that could not be kept is told as that, not as nothing done', async () => {
  const sessions = new sqlite3.Database(join(server.dataDir, 'sessions.sqlite3'));
  await new Promise<void>((resolve) => sessions.run('DROP TABLE sessions', () => resolve()));
  await new Promise<void>((resolve) => sessions.close(() => resolve()));
  const reply = await signIn();
  expect([reply.status, reply.body.error.code]).toEqual([503, 'sign_in_not_kept']);
  expect(reply.body.error.message).toContain('could not keep the sign-in');
});

const MIRA = { email: 'mira@example.org' };
const setHash = (password_hash: string) =>
  server.running.deps.database.writeTransaction((transaction) =>
    server.running.deps.database.models.StaffAccount.update({ password_hash }, { where: MIRA, transaction }),
  );
const keptHash = async () =>
  (await server.running.deps.database.models.StaffAccount.findOne({ where: MIRA }))!.password_hash;
async function weakenHash(): Promise<string> {
  const weaker = await argon2.hash(PASSWORD, { type: argon2.argon2id, memoryCost: 8 * 1024, timeCost: 1 });
  await setHash(weaker);
  return weaker;
}
