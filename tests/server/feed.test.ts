import { afterAll, beforeAll, expect, test } from 'vitest';
import { FeedAnswer, type FeedItem } from '@shared/schemas/sync';
import { startServer, type TestServer } from '../support/startServer';
import type { ApiClient } from './helpers/apiClient';
import { createSchool, joinStudent, must, type School, type StudentClient } from './helpers/people';
import { batch, editItem, rawRun, runItem, tapCapture } from './helpers/runs';

let server: TestServer;
let school: School;
let mate: StudentClient;
let neighbour: StudentClient;
beforeAll(async () => {
  server = await startServer();
  school = await createSchool(server);
  mate = await joinStudent(server, school.ownClass.code, 1, 'Newt');
  neighbour = await joinStudent(server, school.ownClass.code, 2, 'Heron');
});
afterAll(() => server.stop());

const feed = async (client: ApiClient, query = '') => FeedAnswer.parse(must(await client.get(`/api/feed${query}`)));
async function give(client: ApiClient, ...items: ReturnType<typeof runItem | typeof editItem>[]) {
  must(await client.post('/api/sync', batch(items)));
  await server.running.deps.analyses.settled();
  return items[0]!.id;
}
const idsOf = (items: FeedItem[], type: FeedItem['type']) =>
  items.flatMap((item) => (item.type === type && 'id' in item ? [item.id] : []));

test('who hears of a run: its bench, the class’s teacher and coordinators; nobody else', async () => {
  const ids = {
    own: await give(school.student, runItem()),
    ofNeighbour: await give(neighbour, runItem()),
    ofOtherClass: await give(school.otherStudent, runItem()),
    ofVolunteer: await give(school.volunteer, runItem()),
    ofTeacherAlone: await give(school.teacher, runItem()),
  };
  const heard = async (client: ApiClient) => {
    const seen = new Set(idsOf((await feed(client)).items, 'run'));
    return Object.entries(ids).flatMap(([name, id]) => (seen.has(id) ? [name] : []));
  };
  expect(await heard(school.student)).toEqual(['own']);
  expect(await heard(mate)).toEqual(['own']);
  expect(await heard(neighbour)).toEqual(['ofNeighbour']);
  expect(await heard(school.otherStudent)).toEqual(['ofOtherClass']);
  expect(await heard(school.teacher)).toEqual(['own', 'ofNeighbour', 'ofTeacherAlone']);
  expect(await heard(school.otherTeacher)).toEqual(['ofOtherClass']);
  expect(await heard(school.volunteer)).toEqual(['ofVolunteer']);
  expect(await heard(school.coordinator)).toEqual(Object.keys(ids));
});

test('edits and analyses are heard of by whoever hears of their run', async () => {
  const run = runItem();
  const edit = editItem(run.id, { kind: 'leave_out_mark', mark: 2 });
  await give(school.student, run, edit);
  const about = async (client: ApiClient) =>
    (await feed(client)).items.filter((item) =>
      item.type === 'analysis' ? item.analysis.run_id === run.id : item.type === 'edit' && item.run_id === run.id,
    );
  expect((await about(mate)).map(({ type }) => type)).toEqual(['edit', 'analysis']);
  expect((await about(school.teacher)).map(({ type }) => type)).toEqual(['edit', 'analysis']);
  expect(await about(neighbour)).toEqual([]);
  expect(await about(school.otherTeacher)).toEqual([]);
});

test('of a run’s analyses only the one in force comes, whatever the cursor was', async () => {
  const run = runItem();
  const { cursor } = await feed(school.student);
  await give(school.student, run);
  const first = await feed(school.student, `?after=${cursor}`);
  await give(school.student, editItem(run.id, { kind: 'leave_out_mark', mark: 2 }));
  await give(school.student, editItem(run.id, { kind: 'leave_out_mark', mark: 3 }));
  const marksUsed = (part: FeedAnswer) =>
    part.items.flatMap((item) => (item.type === 'analysis' ? [item.analysis.marks_used] : []));
  expect(marksUsed(first)).toEqual([11]);
  expect(marksUsed(await feed(school.student, `?after=${cursor}`))).toEqual([9]);
  expect(marksUsed(await feed(school.student, `?after=${first.cursor}`))).toEqual([9]);
});

test('a row that cannot be read is passed over, and all after it comes', async () => {
  const other = await startServer();
  const { student } = await createSchool(other);
  const items = [runItem(), runItem()];
  must(await student.post('/api/sync', batch(items)));
  await other.running.deps.analyses.settled();
  await other.running.deps.database.sequelize.query(
    `UPDATE analyses SET body = '{"half":' WHERE run_id = '${items[0]!.id}'`,
  );
  const { items: heard, more } = await feed(student);
  expect(heard.flatMap((item) => (item.type === 'analysis' ? [item.analysis.run_id] : []))).toEqual([items[1]!.id]);
  expect(idsOf(heard, 'run')).toEqual(items.map(({ id }) => id));
  expect(more).toBe(false);
  await other.stop();
});

test('names: bench mates and the teacher see nicknames, a coordinator of no class sees none', async () => {
  const id = await give(school.student, runItem());
  const author = async (client: ApiClient) => {
    const run = (await feed(client)).items.find((item) => item.type === 'run' && item.id === id);
    return run && 'author' in run ? run.author : undefined;
  };
  const named = { kind: 'student', id: school.student.me.id, name: 'Otter' };
  expect(await author(mate)).toEqual(named);
  expect(await author(school.teacher)).toEqual(named);
  expect(await author(school.coordinator)).toEqual({ ...named, name: null });
});

test('a run comes with its bytes, receipt and skew', async () => {
  const item = runItem();
  const answer = must(await school.student.post('/api/sync', batch([item], { sent_wall_ms: Date.now() - 60_000 })));
  const found = (await feed(mate)).items.find((each) => each.type === 'run' && each.id === item.id);
  expect(found).toMatchObject({ raw: item.raw, digest: item.digest, receipt: answer.verdicts[0].receipt, bench: 1 });
  expect(found?.type === 'run' && Math.abs(found.clock_skew_ms + 60_000)).toBeLessThan(5_000);
});

test('walking by any limit gives every item once, in the order of the server, while others hand in', async () => {
  const whole = new Set<string>();
  let cursor = 0;
  const seqs: number[] = [];
  for (let step = 0; step < 200; step += 1) {
    const part = await feed(school.teacher, `?after=${cursor}&limit=3`);
    seqs.push(...part.items.map(({ seq }) => seq));
    for (const id of idsOf(part.items, 'run')) whole.add(id);
    cursor = part.cursor;
    if (step < 5) await give(step % 2 ? school.otherStudent : school.student, runItem());
    if (!part.more && step >= 5) break;
  }
  expect(seqs).toEqual([...new Set(seqs)].sort((a, b) => a - b));
  const held = await server.running.deps.database.models.Run.findAll({ where: { class_id: school.ownClass.id } });
  expect(held.every(({ id }) => whole.has(id))).toBe(true);
});

test('a cursor read while twenty phones hand in never skips a run', async () => {
  const seen = new Set<string>();
  const sent: string[] = [];
  let cursor = (await feed(school.teacher)).cursor;
  let isDone = false;
  const reading = (async () => {
    for (let last = false; !last;) {
      last = isDone;
      const part = await feed(school.teacher, `?after=${cursor}`);
      for (const id of idsOf(part.items, 'run')) seen.add(id);
      cursor = part.cursor;
    }
  })();
  await Promise.all(
    Array.from({ length: 20 }, async (_, i) => {
      const items = [runItem(), runItem()];
      sent.push(...items.map(({ id }) => id));
      must(await (i % 2 ? school.student : neighbour).post('/api/sync', batch(items)));
    }),
  );
  isDone = true;
  await reading;
  expect(sent.filter((id) => !seen.has(id))).toEqual([]);
});

test('with nothing new the cursor stays and there are no items', async () => {
  const { cursor } = await feed(school.student);
  expect(await feed(school.student, `?after=${cursor}`)).toMatchObject({ cursor, more: false, items: [] });
});

test('a cursor from another life of the database starts over', async () => {
  const whole = await feed(school.student);
  const over = await feed(school.student, `?after=${Number.MAX_SAFE_INTEGER}`);
  expect(over.items).toEqual(whole.items);
  expect(over.cursor).toBe(whole.cursor);
});

test('an answer stays within two million bytes, and the next one goes on where it ended', async () => {
  const other = await startServer();
  const { student } = await createSchool(other);
  const rejected = Array.from({ length: 1_900 }, (_, i) => ({ why: 'bounce' as const, at_us: 1_000_000 + i }));
  const big = () => runItem(rawRun({ capture: tapCapture({ rejected }) }));
  for (let i = 0; i < 4; i += 1) must(await student.post('/api/sync', batch(Array.from({ length: 12 }, big))));
  const sizes: number[] = [];
  const ids: string[] = [];
  for (let after = 0, more = true; more;) {
    const reply = await student.get(`/api/feed?after=${after}`);
    sizes.push(reply.text.length);
    ids.push(...idsOf(reply.body.items, 'run'));
    ({ cursor: after, more } = reply.body);
  }
  expect(Math.max(...sizes)).toBeLessThan(2_600_000);
  expect(sizes.length).toBeGreaterThan(1);
  expect(new Set(ids).size).toBe(48);
  await other.stop();
});
