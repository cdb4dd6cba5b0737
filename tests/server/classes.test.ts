import { afterAll, beforeAll, expect, test } from 'vitest';
import { startServer, type TestServer } from '../support/startServer';
import { createApiClient } from './helpers/apiClient';
import { createClass, createSchool, joinStudent, must, type School } from './helpers/people';
import { batch, runItem } from './helpers/runs';

let server: TestServer;
let school: School;
beforeAll(async () => {
  server = await startServer();
  school = await createSchool(server);
});
afterAll(() => server.stop());

test('a new class has a code, a board pass, nobody in it and no runs', async () => {
  const made = await createClass(school.teacher, 'Physics 12');
  expect(made).toMatchObject({ name: 'Physics 12', teacher_word: 'copper', students: [], runs: 0 });
  expect(made.code).toMatch(/^[2346789BCDFGHJKMPQRTVWXY]{6}$/);
  expect(made.board_pass).toMatch(/^[\w-]{43}$/);
});

test('a class lists its people by bench and counts its runs', async () => {
  const made = await createClass(school.teacher);
  const second = await joinStudent(server, made.code, 2, 'Wren');
  await joinStudent(server, made.code, 1, 'Lynx');
  must(await second.post('/api/sync', batch([runItem(), runItem()])));
  const seen = must(await school.teacher.get(`/api/classes/${made.id}`)).class;
  expect(seen.students).toMatchObject([
    { bench: 1, nickname: 'Lynx' },
    { bench: 2, nickname: 'Wren' },
  ]);
  expect(seen.runs).toBe(2);
});

test('with a new code the old one opens nothing, and who is in stays in', async () => {
  const made = await createClass(school.teacher);
  const student = await joinStudent(server, made.code);
  const renewed = must(await school.teacher.post(`/api/classes/${made.id}/new-code`)).class;
  expect(renewed.code).not.toBe(made.code);
  const lookUp = (code: string) => createApiClient(server.url).post('/api/classes/look-up', { code });
  expect((await lookUp(made.code)).status).toBe(404);
  expect((await lookUp(renewed.code)).status).toBe(200);
  expect((await student.get('/api/me')).body.me.nickname).toBe('Otter');
});

test('with a new board pass the old link shows nothing', async () => {
  const made = await createClass(school.teacher);
  const renewed = must(await school.teacher.post(`/api/classes/${made.id}/new-board-pass`)).class;
  const board = (pass: string) => createApiClient(server.url).get('/api/board', { headers: { 'X-Board-Pass': pass } });
  expect((await board(made.board_pass)).status).toBe(401);
  expect((await board(renewed.board_pass)).status).toBe(200);
});

test('with a new PIN the old one and the devices that used it are out', async () => {
  const made = await createClass(school.teacher);
  const student = await joinStudent(server, made.code);
  const { pin } = must(await school.teacher.post(`/api/students/${student.me.id}/new-pin`));
  expect((await student.get('/api/feed')).status).toBe(401);
  const comeBack = (said: string) =>
    createApiClient(server.url).post('/api/return', { code: made.code, bench: 1, nickname: 'Otter', pin: said });
  expect((await comeBack(pin)).status).toBe(200);
  if (pin !== student.pin) expect((await comeBack(student.pin)).status).toBe(401);
});

test('a student who has handed nothing in is taken out: signed out, the place free, and written down', async () => {
  const made = await createClass(school.teacher);
  const student = await joinStudent(server, made.code);
  expect((await school.teacher.delete(`/api/students/${student.me.id}`)).body).toEqual({ done: true });
  expect((await student.get('/api/me')).body).toEqual({ me: null });
  expect(must(await school.teacher.get(`/api/classes/${made.id}`)).class.students).toEqual([]);
  await joinStudent(server, made.code, student.bench, student.nickname);
  const entry = await server.running.deps.database.models.ActivityEntry.findOne({
    where: { action: 'student.remove', subject: student.me.id },
  });
  expect(entry?.actor_id).toBe(school.teacher.me.id);
});

test('a student who has handed something in stays, and the teacher is told what to do', async () => {
  const made = await createClass(school.teacher);
  const student = await joinStudent(server, made.code);
  must(await student.post('/api/sync', batch([runItem()])));
  const reply = await school.teacher.delete(`/api/students/${student.me.id}`);
  expect([reply.status, reply.body.error.code]).toEqual([409, 'student_has_runs']);
  expect(reply.body.error.message).toContain('A new PIN');
  expect((await student.get('/api/me')).body.me.id).toBe(student.me.id);
});

test.each([
  ['no name', { name: '  ' }, 'name'],
  ['a name of 61 letters', { name: 'x'.repeat(61) }, 'name'],
  ['no teacher word', { teacher_word: undefined }, 'teacher_word'],
  ['a name over two lines', { name: 'a\nb' }, 'name'],
])('a class with %s is refused', async (_what, change, path) => {
  const reply = await school.teacher.post('/api/classes', { name: 'A', teacher_word: 'oak', ...change });
  expect([reply.status, reply.body.error.fields[0].path]).toEqual([400, path]);
});
