import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { startServer, type TestServer } from '../support/startServer';
import { createApiClient } from './helpers/apiClient';
import { createClass, createSchool, joinStudent, must, PASSWORD, type School } from './helpers/people';

let server: TestServer;
let school: School;
beforeAll(async () => {
  server = await startServer();
  school = await createSchool(server);
});
afterAll(() => server.stop());
const guest = () => createApiClient(server.url);
const join = (body: object) => guest().post('/api/join', { join_id: randomUUID(), ...body });

describe('POST /api/classes/look-up', () => {
  test('shows class name, teacher word and how many people are at each bench, no names', async () => {
    const { code } = school.ownClass;
    const reply = await guest().post('/api/classes/look-up', {
      code: ` ${code.slice(0, 3).toLowerCase()}-${code.slice(3)} `,
    });
    expect(reply.body).toEqual({
      name: 'Physics 10 blue',
      teacher_word: 'copper',
      benches: [{ bench: 1, people: 1 }],
    });
  });
  test('says which code was seen when no class has it', async () => {
    const reply = await guest().post('/api/classes/look-up', { code: 'BBBBBB' });
    expect([reply.status, reply.body.error.code]).toEqual([404, 'no_such_class']);
    expect(reply.body.error.message).toContain('BBBBBB');
  });
  test('names the field when the code has the wrong length', async () => {
    const reply = await guest().post('/api/classes/look-up', { code: 'K4' });
    expect(reply.status).toBe(400);
    expect(reply.body.error.fields).toEqual([
      { path: 'code', message: 'a class code has six letters or digits, like K4R7MP' },
    ]);
  });
});

describe('POST /api/join', () => {
  test('signs the student in and gives the PIN once', async () => {
    const student = await joinStudent(server, school.ownClass.code, 2, 'Heron');
    expect(student.pin).toMatch(/^\d{6}$/);
    const me = await student.get('/api/me');
    expect(me.body.me).toMatchObject({
      kind: 'student',
      nickname: 'Heron',
      bench: 2,
      class: { name: 'Physics 10 blue' },
    });
    expect(me.text).not.toContain(student.pin);
  });
  test('takes a nickname once per bench, whatever the case and spaces', async () => {
    const code = school.ownClass.code;
    await joinStudent(server, code, 3, 'Blue Wren');
    const same = await join({ code, bench: 3, nickname: ' blue  WREN ' });
    expect([same.status, same.body.error.code]).toEqual([409, 'nickname_taken']);
    const elsewhere = await join({ code, bench: 4, nickname: 'Blue Wren' });
    expect(elsewhere.status).toBe(200);
  });
  test('takes two nicknames that differ in what cannot be seen for one', async () => {
    const wanted = { code: school.ownClass.code, bench: 8 };
    expect((await join({ ...wanted, nickname: '❤\ufe0f' })).status).toBe(200);
    expect((await join({ ...wanted, nickname: '❤' })).body.error.code).toBe('nickname_taken');
  });
  test('of two at once with one nickname, one gets it', async () => {
    const wanted = { code: school.ownClass.code, bench: 5, nickname: 'Lynx' };
    const replies = await Promise.all([join(wanted), join(wanted)]);
    expect(replies.map(({ status }) => status).sort()).toEqual([200, 409]);
  });
  test.each([
    ['bench 0', { bench: 0 }],
    ['bench 41', { bench: 41 }],
    ['a bench in letters', { bench: 'two' }],
    ['an empty nickname', { nickname: '   ' }],
    ['a nickname with a NUL', { nickname: 'a\u0000b' }],
    ['a nickname that turns the line round', { nickname: 'a\u202eb' }],
    ['an unknown field', { role: 'teacher' }],
    ['a nickname with a zero-width space', { nickname: 'Ot\u200bter' }],
    ['a nickname with a joiner between letters', { nickname: 'Ot\u200dter' }],
    ['a nickname with a soft hyphen', { nickname: 'Ot\u00adter' }],
    ['a nickname of a Hangul filler', { nickname: '\u3164' }],
    ['a nickname of an empty Braille pattern', { nickname: '\u2800' }],
    ['a nickname with a tag after no flag', { nickname: 'Otter\u{e0061}' }],
    ['no id of the join', { join_id: undefined }],
  ])('refuses %s and names the field', async (_what, change) => {
    const reply = await join({
      code: school.ownClass.code,
      bench: 1,
      nickname: 'Newt',
      ...change,
    });
    expect([reply.status, reply.body.error.code]).toEqual([400, 'bad_input']);
    expect(reply.body.error.fields[0].path).toBe(Object.keys(change)[0]);
    expect(reply.text.toLowerCase()).not.toMatch(/invalid|oops/);
  });
  test.each(["Zoë 🦊 'x", '👩🏽‍🔬 Ada', '🏴󠁧󠁢󠁳󠁣󠁴󠁿 3', '❤️ 1️⃣', 'मीरा', '김수달'])(
    'keeps the nickname %s as it was typed',
    async (nickname) => {
      const student = await joinStudent(server, school.ownClass.code, 6, nickname);
      expect((await student.get('/api/me')).body.me.nickname).toBe(nickname);
    },
  );
  test('takes twelve people at a bench and says where to go then', async () => {
    const { code } = await createClass(school.teacher);
    for (let i = 0; i < 12; i += 1) await joinStudent(server, code, 9, `Student ${i}`);
    const over = await join({ code, bench: 9, nickname: 'Newt' });
    expect([over.status, over.body.error.code, over.body.error.fields[0].path]).toEqual([409, 'bench_full', 'bench']);
    expect((await join({ code, bench: 10, nickname: 'Newt' })).status).toBe(200);
  });
});

describe('a join whose answer was lost', () => {
  const wanted = async () => ({
    join_id: randomUUID(),
    code: (await createClass(school.teacher)).code,
    bench: 1,
    nickname: 'Otter',
  });
  test('is sent again and opens the same student with a PIN that works; the one nobody saw does not', async () => {
    const body = await wanted();
    const [lost, again] = [must(await join(body)), must(await join({ ...body, nickname: 'OTTER ' }))];
    expect(again.me).toEqual(lost.me);
    const comeBack = ({ pin }: { pin: string }) =>
      guest().post('/api/return', { code: body.code, bench: 1, nickname: 'Otter', pin });
    expect((await comeBack(again)).body.me.id).toBe(again.me.id);
    if (lost.pin !== again.pin) expect((await comeBack(lost)).status).toBe(401);
  });
  test('sent twice at once makes one student', async () => {
    const body = await wanted();
    const replies = await Promise.all([join(body), join(body)]);
    expect(replies.map(({ status }) => status)).toContain(200);
    const card = must(await guest().post('/api/classes/look-up', { code: body.code }));
    expect(card.benches).toEqual([{ bench: 1, people: 1 }]);
  });
  test.each([{ nickname: 'Newt' }, { bench: 2 }])('does not open somebody else: %o', async (change) => {
    const body = await wanted();
    must(await join(body));
    const other = await join({ ...body, ...change });
    expect([other.status, other.body.error.code]).toEqual([409, 'join_used']);
  });
  test('is not opened by another id', async () => {
    const body = await wanted();
    must(await join(body));
    expect((await join({ ...body, join_id: randomUUID() })).body.error.code).toBe('nickname_taken');
  });
  test('can be sent again for a quarter of an hour', async () => {
    let later = 0;
    const other = await startServer({}, () => Date.now() + later);
    const { ownClass } = await createSchool(other);
    const body = { join_id: randomUUID(), code: ownClass.code, bench: 7, nickname: 'Newt' };
    const send = () => createApiClient(other.url).post('/api/join', body);
    must(await send());
    later = 14 * 60_000;
    expect((await send()).status).toBe(200);
    later = 16 * 60_000;
    expect((await send()).body.error.code).toBe('nickname_taken');
    await other.stop();
  });
});

describe('POST /api/return', () => {
  test('opens the same student on another phone', async () => {
    const { student, ownClass } = school;
    const phone = guest();
    const said = { code: ownClass.code, bench: student.bench, nickname: 'otter', pin: student.pin };
    const reply = await phone.post('/api/return', said);
    expect(reply.body.me.id).toBe(student.me.id);
    expect((await student.get('/api/me')).body.me.id).toBe(student.me.id);
  });
  test.each([' abc def', 'abc-def', 'abc\u2011def\u00a0'])('a PIN typed like %j is the PIN', async (like) => {
    const { code } = await createClass(school.teacher);
    const { pin } = await joinStudent(server, code);
    const typed = like.replace('abc', pin.slice(0, 3)).replace('def', pin.slice(3));
    must(await guest().post('/api/return', { code, bench: 1, nickname: 'Otter', pin: typed }));
  });
  test('does not tell a wrong PIN from an unknown nickname or class code', async () => {
    const { student, ownClass } = school;
    const said = { code: ownClass.code, bench: student.bench, nickname: student.nickname };
    const wrongPin = student.pin === '000000' ? '000001' : '000000';
    const [pin, nickname] = [
      await guest().post('/api/return', { ...said, pin: wrongPin }),
      await guest().post('/api/return', { ...said, nickname: 'Nobody', pin: student.pin }),
    ];
    const code = await guest().post('/api/return', { ...said, code: 'BBBBBB', pin: student.pin });
    expect([pin.status, pin.body]).toEqual([nickname.status, nickname.body]);
    expect([pin.status, pin.body]).toEqual([code.status, code.body]);
    expect(pin.body.error.code).toBe('pin_not_matched');
  });
});

describe('POST /api/sign-in and /api/sign-out', () => {
  test('sign-in by e-mail in any case; sign-out ends it', async () => {
    const client = guest();
    const reply = await client.post('/api/sign-in', { email: ' MIRA@example.org ', password: PASSWORD });
    expect(reply.body.me).toMatchObject({ kind: 'teacher', email: 'mira@example.org' });
    const cookie = client.cookie;
    expect((await client.post('/api/sign-out')).body).toEqual({ done: true });
    expect(client.cookie).toBe('');
    client.cookie = cookie;
    expect((await client.get('/api/me')).body).toEqual({ me: null });
    expect((await client.get('/api/classes')).status).toBe(401);
  });
  test('does not tell a wrong password from an unknown e-mail, in words or in time', async () => {
    const timed = async (email: string) => {
      const start = performance.now();
      const reply = await guest().post('/api/sign-in', { email, password: 'not the password' });
      return { ms: performance.now() - start, body: reply.body, status: reply.status };
    };
    const known = [await timed('noor@example.org'), await timed('noor@example.org'), await timed('noor@example.org')];
    const unknown = [await timed('a1@example.org'), await timed('a2@example.org'), await timed('a3@example.org')];
    expect(unknown[0]!.body).toEqual(known[0]!.body);
    expect(unknown[0]!.status).toBe(401);
    const least = (tries: { ms: number }[]) => Math.min(...tries.map(({ ms }) => ms));
    // A hash takes some 25 ms here; without the dummy hash an unknown address would answer in about 2.
    expect(least(unknown)).toBeGreaterThan(least(known) / 2);
  });
  test('GET /api/me says null to nobody', async () => {
    expect((await guest().get('/api/me')).body).toEqual({ me: null });
  });
});
