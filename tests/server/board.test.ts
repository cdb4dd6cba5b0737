import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { BoardAnswer } from '@shared/schemas/accounts';
import { startServer, type TestServer } from '../support/startServer';
import { createApiClient } from './helpers/apiClient';
import { createSchool, joinStudent, must, type School } from './helpers/people';
import { batch, editItem, rawRun, runItem, tapCapture } from './helpers/runs';

let server: TestServer;
let school: School;
beforeAll(async () => {
  server = await startServer();
  school = await createSchool(server);
});
afterAll(() => server.stop());

async function board(after = 0, pass = school.ownClass.board_pass) {
  await server.running.deps.analyses.settled();
  const reply = await createApiClient(server.url).get(`/api/board?after=${after}`, {
    headers: { 'X-Board-Pass': pass },
  });
  return BoardAnswer.parse(must(reply));
}

test('a board shows a dot for each run of its class by bench, and nothing anybody wrote', async () => {
  const item = runItem(rawRun({ note: 'secret note' }));
  must(await school.student.post('/api/sync', batch([item])));
  must(await school.otherStudent.post('/api/sync', batch([runItem()])));
  must(await school.teacher.post('/api/sync', batch([runItem(rawRun(), { class_id: school.ownClass.id })])));
  const answer = await board();
  expect(answer).toMatchObject({ class_name: 'Physics 10 blue', code: school.ownClass.code });
  expect(answer.points).toHaveLength(1);
  const [point] = answer.points;
  expect(point).toMatchObject({ run_id: item.id, bench: 1 });
  // 2.007 s at 10° and a little less is 2.003 s at no amplitude.
  expect(point!.small_period_s!.value).toBeCloseTo(2.003, 1);
  expect(JSON.stringify(answer)).not.toMatch(/Otter|secret/);
});

test('only what is new or changed comes after the cursor', async () => {
  const item = runItem();
  must(await school.student.post('/api/sync', batch([item])));
  const { cursor } = await board();
  expect((await board(cursor)).points).toEqual([]);
  must(await school.student.post('/api/sync', batch([editItem(item.id, { kind: 'leave_out_mark', mark: 1 })])));
  const changed = await board(cursor);
  expect(changed.points.map(({ run_id }) => run_id)).toEqual([item.id]);
  expect(changed.cursor).toBeGreaterThan(cursor);
});

test('flags that nobody answered are counted, answered ones are not', async () => {
  const marks = [...tapCapture().mark_us];
  marks.splice(5, 0, marks[5]! - 150_000);
  const item = runItem(rawRun({ capture: tapCapture({ mark_us: marks }) }));
  const bench = await joinStudent(server, school.ownClass.code, 12, 'Vole');
  must(await bench.post('/api/sync', batch([item])));
  const open = async () => (await board()).points.find(({ run_id }) => run_id === item.id)!.open_flags;
  const before = await open();
  expect(before).toBeGreaterThan(0);
  must(await bench.post('/api/sync', batch([editItem(item.id, { kind: 'leave_out_mark', mark: 5 })])));
  expect(await open()).toBeLessThan(before);
});

test('a dot carries the uncertainty the Desk states', async () => {
  const item = runItem();
  const { analyses } = must(await school.student.post('/api/sync', batch([item])));
  const { value, u, expanded_u, coverage_factor } = analyses[0].small_period_s;
  const point = (await board()).points.find(({ run_id }) => run_id === item.id)!;
  expect(point.small_period_s).toEqual({ value, u, expanded_u });
  expect(coverage_factor).not.toBeCloseTo(2, 2);
});

test('a database of the version before gets the stated uncertainty of the runs it holds', async () => {
  const dataDir = mkdtempSync(join(tmpdir(), 'swaymark-before-'));
  try {
    const first = await startServer({ dataDir });
    const { student } = await createSchool(first);
    const item = runItem();
    const { analyses } = must(await student.post('/api/sync', batch([item])));
    await first.running.deps.database.writeTransaction(async (transaction) => {
      for (const sql of [
        'ALTER TABLE current_analyses DROP COLUMN small_period_expanded_u_s',
        'ALTER TABLE current_analyses DROP COLUMN set_aside',
        `DELETE FROM migrations WHERE name = '0002-board-figures'`,
      ])
        await first.running.deps.database.run(sql, [], transaction);
    });
    await first.stop();
    const second = await startServer({ dataDir });
    const rows = await second.running.deps.database.select(
      'SELECT small_period_expanded_u_s AS expanded_u, set_aside FROM current_analyses',
      [],
    );
    expect(rows).toEqual([{ expanded_u: analyses[0].small_period_s.expanded_u, set_aside: 0 }]);
    await second.stop();
  } finally {
    rmSync(dataDir, { recursive: true, force: true });
  }
});

test('a run set aside comes after the cursor to be taken off, and comes back when that is undone', async () => {
  const item = runItem();
  must(await school.student.post('/api/sync', batch([item])));
  const { cursor } = await board();
  const aside = editItem(item.id, { kind: 'set_aside' }, 1, 'bob hit the stand');
  must(await school.student.post('/api/sync', batch([aside])));
  const off = await board(cursor);
  expect(off.points).toEqual([
    { run_id: item.id, bench: 1, small_period_s: null, length_m: null, open_flags: 0, set_aside: true },
  ]);
  must(await school.student.post('/api/sync', batch([editItem(item.id, { kind: 'withdraw', edit_id: aside.id }, 2)])));
  const back = await board(off.cursor);
  expect(back.points).toMatchObject([{ run_id: item.id, small_period_s: { value: expect.any(Number) as number } }]);
  expect(back.points[0]).not.toHaveProperty('set_aside');
});

test('a pass nobody has, or none, shows nothing; a pass opens nothing else', async () => {
  const ask = (path: string, headers = {}) => createApiClient(server.url).get(path, { headers });
  expect((await ask('/api/board')).status).toBe(401);
  expect((await ask('/api/board', { 'X-Board-Pass': 'x' })).status).toBe(401);
  const pass = { 'X-Board-Pass': school.ownClass.board_pass };
  expect((await ask('/api/feed', pass)).status).toBe(403);
  expect((await ask('/api/classes', pass)).status).toBe(403);
  expect((await ask('/api/board?after=-1', pass)).status).toBe(400);
});

test('a cursor from another life of the database starts over', async () => {
  expect((await board(Number.MAX_SAFE_INTEGER)).points).toEqual((await board()).points);
});
