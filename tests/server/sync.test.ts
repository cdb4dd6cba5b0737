import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, test, vi } from 'vitest';
import { canonicalText, digestOf } from '@shared/schemas/canonical';
import { SyncAnswer, type Verdict } from '@shared/schemas/sync';
import { startServer, type TestServer } from '../support/startServer';
import type { ApiClient } from './helpers/apiClient';
import { databaseDigest } from './helpers/databaseDigest';
import { createSchool, joinStudent, must, type School } from './helpers/people';
import { batch, editItem, rawRun, runItem, tapCapture, type RunItem } from './helpers/runs';

let server: TestServer;
let school: School;
beforeAll(async () => {
  server = await startServer();
  school = await createSchool(server);
});
afterAll(() => server.stop());

async function handIn(client: ApiClient, items: unknown[], changes = {}): Promise<SyncAnswer> {
  return SyncAnswer.parse(must(await client.post('/api/sync', batch(items, changes))));
}
const verdictsOf = async (client: ApiClient, items: unknown[]) => (await handIn(client, items)).verdicts;
const words = (verdicts: Verdict[]) => verdicts.map(({ verdict }) => verdict);
const codes = (verdicts: Verdict[]) => verdicts.map((v) => ('code' in v ? v.code : v.verdict));
const receiptOf = (verdict: Verdict | undefined) => (verdict && 'receipt' in verdict ? verdict.receipt : undefined);
const heldRun = (id: string) => server.running.deps.database.models.Run.findOne({ where: { id } });

describe('what is taken', () => {
  test('a run gets a receipt with its id and digest and is kept byte for byte', async () => {
    const item = runItem();
    const [verdict] = await verdictsOf(school.student, [item]);
    expect(verdict).toMatchObject({ verdict: 'stored', type: 'run', id: item.id, digest: item.digest });
    expect(receiptOf(verdict)?.code).toMatch(/^[2346789BCDFGHJKMPQRTVWXY]{4}$/);
    expect((await heldRun(item.id))?.raw).toBe(item.raw);
  });

  test('the answer carries the analysis, and it is the one the phone computes', async () => {
    const item = runItem();
    const { analyses } = await handIn(school.student, [item]);
    expect(analyses).toHaveLength(1);
    // 10 swings of 2.007 s and up to 0.03 s of scatter.
    expect(analyses[0]!.period_s!.value).toBeCloseTo(2.007, 1);
    expect(analyses[0]!.run_id).toBe(item.id);
  });

  test('R1 the answer was lost: sending again gives the same receipts and changes nothing at all', async () => {
    const run = runItem();
    const items = [run, editItem(run.id, { kind: 'note', text: 'looks good' })];
    const first = await handIn(school.student, items);
    expect(words(first.verdicts)).toEqual(['stored', 'stored']);
    await server.running.deps.analyses.settled();
    const before = await databaseDigest(server);
    const again = await handIn(school.student, items);
    expect(again.verdicts).toEqual(first.verdicts.map((verdict) => ({ ...verdict, verdict: 'already' })));
    expect(again.analyses).toHaveLength(1);
    await server.running.deps.analyses.settled();
    expect(await databaseDigest(server)).toBe(before);
  });

  test('the same run twice in one batch is stored once', async () => {
    const item = runItem();
    const [first, second] = await verdictsOf(school.student, [item, item]);
    expect(words([first!, second!])).toEqual(['stored', 'already']);
    expect(receiptOf(first)).toEqual(receiptOf(second));
  });

  test('an edit may come before its run in the same batch', async () => {
    const run = runItem();
    const edit = editItem(run.id, { kind: 'leave_out_mark', mark: 3 });
    expect(words(await verdictsOf(school.student, [edit, run]))).toEqual(['stored', 'stored']);
  });

  test('an edit changes the analysis, and earlier analyses are kept', async () => {
    const run = runItem();
    const [before] = (await handIn(school.student, [run])).analyses;
    const edit = editItem(run.id, { kind: 'leave_out_mark', mark: 3 });
    const [after] = (await handIn(school.student, [edit])).analyses;
    expect(after!.marks_used).toBe(before!.marks_used - 1);
    const withdraw = editItem(run.id, { kind: 'withdraw', edit_id: edit.id }, 2);
    const [back] = (await handIn(school.student, [withdraw])).analyses;
    expect(back!.marks_used).toBe(before!.marks_used);
    const { StoredAnalysis, Run } = server.running.deps.database.models;
    expect(await StoredAnalysis.count({ where: { run_id: run.id } })).toBeGreaterThanOrEqual(2);
    expect((await Run.findOne({ where: { id: run.id } }))?.raw).toBe(run.raw);
  });

  test('edits count in the order the server got them, not in that of the devices’ clocks', async () => {
    const run = runItem();
    await handIn(school.student, [run]);
    await handIn(school.student, [editItem(run.id, { kind: 'set_swings', swings: 11 }, 7)]);
    const [analysis] = (await handIn(school.student, [editItem(run.id, { kind: 'set_swings', swings: 12 }, 1)]))
      .analyses;
    expect(analysis!.swings).toBe(12);
  });

  test('owner, class and bench of a student’s run are the server’s word, whatever the phone says', async () => {
    const item = runItem(rawRun(), { class_id: school.otherClass.id, bench: 9 });
    await handIn(school.student, [item]);
    expect(await heldRun(item.id)).toMatchObject({
      owner_kind: 'student',
      owner_id: school.student.me.id,
      class_id: school.ownClass.id,
      bench: 1,
    });
  });

  test('a teacher puts a run into a class of one’s own or into none, a volunteer into none', async () => {
    const into = (class_id: string | null) => runItem(rawRun(), { class_id, bench: class_id === null ? null : 3 });
    const { ownClass, otherClass } = school;
    const items = [into(ownClass.id), into(null), into(otherClass.id), into(randomUUID())];
    expect(codes(await verdictsOf(school.teacher, items))).toEqual([
      'stored',
      'stored',
      'class_not_yours',
      'class_not_yours',
    ]);
    expect(await heldRun(items[0]!.id)).toMatchObject({ class_id: ownClass.id, bench: 3, owner_kind: 'staff' });
    expect(codes(await verdictsOf(school.volunteer, [into(null), into(ownClass.id)]))).toEqual([
      'stored',
      'class_not_yours',
    ]);
  });

  test.each([
    ['1970', 0],
    ['a day ahead', Date.now() + 86_400_000],
    ['the year 275760', 8_640_000_000_000_000],
  ])('R13 a phone whose clock says %s hands in; the skew is kept', async (_when, sent_wall_ms) => {
    const item = runItem();
    await handIn(school.student, [item], { sent_wall_ms });
    const skew = sent_wall_ms - Date.now();
    expect(Math.abs((await heldRun(item.id))!.clock_skew_ms - skew)).toBeLessThan(10_000);
  });

  test.each([
    ['quotes and SQL', `'); DROP TABLE runs; -- "`],
    ['an escaped NUL', 'a\u0000b'],
    ['emoji and right-to-left text', '🦊 שלום'],
    ['a line separator', 'a\u2028b'],
  ])('a note with %s is kept byte for byte', async (_what, note) => {
    const item = runItem(rawRun({ note }));
    expect(words(await verdictsOf(school.student, [item]))).toEqual(['stored']);
    expect((await heldRun(item.id))?.raw).toBe(item.raw);
  });
});

describe('what is not taken', () => {
  test('R2 the same id with other bytes is a conflict, and what is held stays', async () => {
    const run = rawRun();
    const item = runItem(run);
    await handIn(school.student, [item]);
    const [verdict] = await verdictsOf(school.student, [runItem({ ...run, note: 'other' })]);
    expect(verdict).toMatchObject({ verdict: 'conflict', code: 'other_content' });
    expect((await heldRun(item.id))?.raw).toBe(item.raw);
  });

  test.each([
    ['a student of another class', () => school.otherStudent],
    [
      'a student of the same bench',
      () => joinStudent(server, school.ownClass.code, 1, `Mate ${randomUUID().slice(0, 8)}`),
    ],
    ['another teacher', () => school.otherTeacher],
    ['a volunteer', () => school.volunteer],
    ['a coordinator', () => school.coordinator],
  ])(
    'R3 the id of somebody else, sent by %s, with the same bytes or others: nothing changes, and it is written down',
    async (_who, other) => {
      const run = rawRun();
      const item = runItem(run);
      await handIn(school.student, [item]);
      const client = await other();
      const before = JSON.stringify(await heldRun(item.id));
      const mine = runItem();
      const verdicts = await verdictsOf(client, [item, runItem({ ...run, note: 'stolen' }), mine]);
      expect(codes(verdicts)).toEqual(['not_yours', 'not_yours', 'stored']);
      expect(JSON.stringify(await heldRun(item.id))).toBe(before);
      const entries = await server.running.deps.database.models.ActivityEntry.count({
        where: { action: 'runs.foreign_id', subject: item.id },
      });
      expect(entries).toBe(2);
    },
  );

  test('a run the teacher collected is known again when the student’s own phone sends it, and the other way round', async () => {
    const collected = runItem(rawRun(), { class_id: school.ownClass.id, bench: 1 });
    const [first] = await verdictsOf(school.teacher, [collected]);
    const [second] = await verdictsOf(school.student, [{ ...collected, class_id: null, bench: null }]);
    expect(second).toEqual({ ...first, verdict: 'already' });
    const own = runItem();
    await handIn(school.student, [own]);
    expect(words(await verdictsOf(school.teacher, [own]))).toEqual(['already']);
    expect((await heldRun(own.id))?.owner_id).toBe(school.student.me.id);
  });

  test('R5 one bad item of each kind among good ones stops none of them', async () => {
    const good = [runItem(), runItem()];
    const run = rawRun();
    const loose = canonicalText(run);
    const bad: RunItem[] = [
      { ...runItem(), digest: '0'.repeat(64) },
      { ...runItem(), id: randomUUID() },
      sealedAs(run.id, '{"half":'),
      sealedAs(run.id, JSON.stringify(run, null, 1)),
      sealedAs(run.id, loose.replace('{"amplitudes"', '{"a":1,"amplitudes"')),
      sealedAs(run.id, loose.replace('"version":1', '"version":99')),
      sealedAs(run.id, loose.replace('swaymark-run', 'other-run')),
      runItem(rawRun({ capture: tapCapture({ mark_us: [0, 5, 5] }) })),
      runItem(rawRun({ capture: tapCapture({ mark_us: [0, 1.5] }) })),
      runItem(rawRun({ note: 'half of a surrogate pair \ud800' })),
      sealedAs(run.id, '{"format":{"toString":1,"valueOf":1}}'),
      sealedAs(run.id, loose.replace('"version":1', '"version":{"toString":null}')),
      sealedAs(run.id, `{"format":${'['.repeat(90_000)}${']'.repeat(90_000)}}`),
    ];
    const verdicts = await verdictsOf(school.student, [good[0], ...bad, good[1]]);
    expect(words(verdicts)).toEqual(['stored', ...bad.map(() => 'refused'), 'stored']);
    for (const verdict of verdicts.slice(1, -1)) {
      expect('message' in verdict && verdict.message.length).toBeGreaterThan(20);
      expect(JSON.stringify(verdict).toLowerCase()).not.toMatch(/invalid|oops/);
    }
    expect(await heldRun(run.id)).toBeNull();
  });

  test('R5 what is wrong with a mark is named by its path', async () => {
    const [verdict] = await verdictsOf(school.student, [
      runItem(rawRun({ capture: tapCapture({ mark_us: [0, 5, 5] }) })),
    ]);
    expect('fields' in verdict! && verdict.fields.map(({ path }) => path)).toEqual(['capture.mark_us']);
  });

  test('an edit of a run that has not arrived waits; of one that was refused beside it, it is refused', async () => {
    const run = rawRun();
    const bad = { ...runItem(run), digest: '0'.repeat(64) };
    const waiting = editItem(randomUUID(), { kind: 'note', text: 'early' });
    const orphan = editItem(run.id, { kind: 'note', text: 'no run' });
    const verdicts = await verdictsOf(school.student, [waiting, bad, orphan]);
    expect(words(verdicts)).toEqual(['later', 'refused', 'refused']);
    expect(codes(verdicts)[2]).toBe('run_not_taken');
  });

  test.each([
    ['the bench mate', async () => joinStudent(server, school.ownClass.code, 1, 'Mate'), 'stored'],
    ['the teacher of the class', () => school.teacher, 'stored'],
    ['a student of another bench', async () => joinStudent(server, school.ownClass.code, 8, 'Far'), 'not_yours'],
    ['a student of another class', () => school.otherStudent, 'not_yours'],
    ['another teacher', () => school.otherTeacher, 'not_yours'],
    ['a volunteer', () => school.volunteer, 'not_yours'],
    ['a coordinator of no class', () => school.coordinator, 'not_yours'],
  ])('an edit by %s: %s', async (_who, author, expected) => {
    const run = runItem();
    await handIn(school.student, [run]);
    const edit = editItem(run.id, { kind: 'note', text: 'by another' });
    expect(codes(await verdictsOf(await author(), [edit]))).toEqual([expected]);
  });

  test('a student withdraws edits of the bench, and no edit of the teacher’s', async () => {
    const run = runItem();
    const [own, ofTeacher] = [1, 2].map((mark) => editItem(run.id, { kind: 'leave_out_mark', mark }));
    await handIn(school.student, [run, own]);
    await handIn(school.teacher, [ofTeacher]);
    const withdrawals = [own!, ofTeacher!].map(({ id }) => editItem(run.id, { kind: 'withdraw', edit_id: id }));
    const verdicts = await verdictsOf(school.student, withdrawals);
    expect(codes(verdicts)).toEqual(['stored', 'edit_of_staff']);
    expect('message' in verdicts[1]! && verdicts[1].message).toMatch(/Ask them to withdraw it/);
    expect(
      words(await verdictsOf(school.teacher, [editItem(run.id, { kind: 'withdraw', edit_id: ofTeacher!.id })])),
    ).toEqual(['stored']);
  });

  test('a run is set aside by whoever timed it or by the teacher, with a reason, and by nobody else of the bench', async () => {
    const mate = await joinStudent(server, school.ownClass.code, 1, 'Heron');
    const item = runItem();
    must(await school.student.post('/api/sync', batch([item])));
    const aside = () => editItem(item.id, { kind: 'set_aside' }, 1, 'bob hit the stand');
    const send = async (who: ApiClient, edit: ReturnType<typeof editItem>) => {
      const [verdict] = must(await who.post('/api/sync', batch([edit]))).verdicts;
      return verdict.code ?? verdict.verdict;
    };
    expect(await send(school.student, editItem(item.id, { kind: 'set_aside' }))).toBe('fields');
    expect(await send(mate, aside())).toBe('not_your_run');
    const [own, teachers] = [aside(), aside()];
    expect(await send(school.student, own)).toBe('stored');
    const undo = (edit_id: string, made_seq: number) => editItem(item.id, { kind: 'withdraw', edit_id }, made_seq);
    const undone = undo(own.id, 2);
    expect(await send(mate, undo(own.id, 2))).toBe('not_your_run');
    expect(await send(school.student, undone)).toBe('stored');
    expect(await send(mate, undo(undone.id, 3))).toBe('not_your_run');
    expect(await send(school.teacher, teachers)).toBe('stored');
    expect(await send(school.student, undo(teachers.id, 4))).toBe('edit_of_staff');
    expect(await send(school.otherTeacher, aside())).toBe('not_yours');
    expect(await send(mate, editItem(item.id, { kind: 'note', text: 'seen' }, 5))).toBe('stored');
  });

  test('an edit id that is held by its author does not open for another', async () => {
    const run = runItem();
    const edit = editItem(run.id, { kind: 'note', text: 'mine' });
    await handIn(school.student, [run, edit]);
    expect(codes(await verdictsOf(school.teacher, [edit]))).toEqual(['not_yours']);
    const changed = { ...edit, ...resealed(edit.raw.replace('mine', 'ours')) };
    expect(codes(await verdictsOf(school.student, [changed]))).toEqual(['other_content']);
  });

  test('an edit whose run id is not the one inside it is refused', async () => {
    const [one, two] = [runItem(), runItem()];
    await handIn(school.student, [one, two]);
    const edit = { ...editItem(one.id, { kind: 'note', text: 'x' }), run_id: two.id };
    expect(codes(await verdictsOf(school.student, [edit]))).toEqual(['id_differs']);
  });

  test('over the day’s number of runs the rest is told to come later, and what is in stays known', async () => {
    const { database } = server.running.deps;
    const busy = await joinStudent(server, school.ownClass.code, 20, 'Busy');
    const first = runItem();
    await handIn(busy, [first]);
    await database.writeTransaction((transaction) =>
      database.run(
        `WITH RECURSIVE n (i) AS (SELECT 1 UNION ALL SELECT i + 1 FROM n WHERE i < 1999)
         INSERT INTO runs (seq, id, digest, raw, owner_kind, owner_id, device_id, received_ms, clock_skew_ms, receipt_code)
         SELECT 1000000 + i, 'filler-' || i, '', '', 'student', $1, '', $2, 0, '' FROM n`,
        [busy.me.id, Date.now()],
        transaction,
      ),
    );
    const second = runItem();
    const edit = editItem(second.id, { kind: 'note', text: 'of the second' });
    const verdicts = await verdictsOf(busy, [second, first, edit]);
    expect(codes(verdicts)).toEqual(['day_is_full', 'already', 'run_unknown']);
    expect(words(verdicts)).toEqual(['later', 'already', 'later']);
    await database.writeTransaction((transaction) =>
      database.run(`DELETE FROM runs WHERE id LIKE 'filler-%'`, [], transaction),
    );
  });
});

describe('analyses are not made anew', () => {
  const rowsOf = async (run_id: string) => {
    await server.running.deps.analyses.settled();
    return server.running.deps.database.models.StoredAnalysis.findAll({ where: { run_id } });
  };

  test('when a run and its edits are sent again', async () => {
    const run = runItem();
    const items = [run, editItem(run.id, { kind: 'leave_out_mark', mark: 4 })];
    await handIn(school.student, items);
    const { analyses } = server.running.deps;
    await analyses.settled();
    const computing = vi.spyOn(server.running.deps.log, 'error');
    // A row that cannot be computed is told to the log, so silence says that nothing was computed.
    await server.running.deps.database.sequelize.query(`UPDATE runs SET raw = '{' WHERE id = '${run.id}'`);
    const again = await handIn(school.student, items);
    expect(again.analyses).toHaveLength(1);
    await analyses.settled();
    expect(computing).not.toHaveBeenCalled();
    computing.mockRestore();
  });

  test('for a note', async () => {
    const run = runItem();
    await handIn(school.student, [run]);
    const before = await rowsOf(run.id);
    await handIn(school.student, [editItem(run.id, { kind: 'note', text: 'a calm day' })]);
    expect((await rowsOf(run.id)).map(({ seq }) => seq)).toEqual(before.map(({ seq }) => seq));
    expect(before).toHaveLength(1);
  });

  test('and one that is damaged costs no receipt', async () => {
    const run = runItem();
    await handIn(school.student, [run]);
    await rowsOf(run.id);
    await server.running.deps.database.sequelize.query(`UPDATE analyses SET body = '{' WHERE run_id = '${run.id}'`);
    const answer = await handIn(school.student, [run]);
    expect(words(answer.verdicts)).toEqual(['already']);
    expect(answer.analyses).toEqual([]);
  });
});

describe('many at once', () => {
  test('twenty batches in parallel all succeed, and every receipt is in the database', async () => {
    const phones = await Promise.all(
      Array.from({ length: 20 }, (_, i) => joinStudent(server, school.ownClass.code, 21 + (i % 10), `Phone ${i}`)),
    );
    const sent = phones.map(() => Array.from({ length: 5 }, () => runItem()));
    const answers = await Promise.all(phones.map((phone, i) => handIn(phone, sent[i]!)));
    expect(new Set(answers.flatMap(({ verdicts }) => words(verdicts)))).toEqual(new Set(['stored']));
    const seqs = answers.flatMap(({ verdicts }) => verdicts.map((v) => receiptOf(v)?.server_seq));
    expect(new Set(seqs).size).toBe(100);
    for (const item of sent.flat()) expect((await heldRun(item.id))?.digest).toBe(item.digest);
  });

  test('one batch sent five times at once is stored once', async () => {
    const items = [runItem(), runItem(), runItem()];
    const answers = await Promise.all(Array.from({ length: 5 }, () => handIn(school.student, items)));
    const all = answers.map(({ verdicts }) => words(verdicts).join());
    expect(all.filter((each) => each === 'stored,stored,stored')).toHaveLength(1);
    expect(all.filter((each) => each === 'already,already,already')).toHaveLength(4);
    const receipts = answers.map(({ verdicts }) => JSON.stringify(verdicts.map(receiptOf)));
    expect(new Set(receipts).size).toBe(1);
  });

  test('any order and split of the same items leaves the same runs and edits', async () => {
    const contents: string[] = [];
    const runs = [rawRun(), rawRun()];
    for (const arrange of [
      (items: unknown[]) => [items],
      (items: unknown[]) => items.map((item) => [item]),
      (items: unknown[]) => [items.slice(0, 2), items, items.slice(2)],
      (items: unknown[]) => [[...items].reverse()],
    ]) {
      const other = await startServer();
      const { student } = await createSchool(other);
      const items = runs.map((run) => runItem(run));
      for (const part of arrange(items)) must(await student.post('/api/sync', batch(part as unknown[])));
      const rows = await other.running.deps.database.select<{ line: string }>(
        `SELECT id || digest || raw || bench AS line FROM runs ORDER BY id`,
        [],
      );
      contents.push(digestOf(JSON.stringify(rows)));
      await other.stop();
    }
    expect(new Set(contents).size).toBe(1);
  });
});

function sealedAs(id: string, raw: string): RunItem {
  return { type: 'run', id, class_id: null, bench: null, ...resealed(raw) };
}
function resealed(raw: string) {
  return { raw, digest: digestOf(raw) };
}
