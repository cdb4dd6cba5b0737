import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { EditChange, RawEdit } from '@shared/schemas/edit';
import type { RawRun } from '@shared/schemas/run';
import { foldRun } from '@shared/timing/foldRun';
import { anyChange, anyRun } from '../../factories/anyRun';
import {
  angleReading,
  rawEdit,
  rawEdits,
  rawGateRun,
  rawKeyedRun,
  rawTapRun,
  stringRig,
  uuid,
} from '../../factories/rawRuns';

const fold = (run: RawRun, ...changes: EditChange[]) => foldRun(run, rawEdits(run, ...changes));
const swings = (run: RawRun, ...changes: EditChange[]) => fold(run, ...changes).marks.map(({ swing }) => swing);
const leaveOut = (mark: number): EditChange => ({ kind: 'leave_out_mark', mark });

describe('foldRun', () => {
  test('never touches the run', () => {
    fc.assert(
      fc.property(anyRun, fc.array(anyChange, { maxLength: 5 }), (run, changes) => {
        const before = JSON.stringify(run);
        fold(run, ...changes);
        expect(JSON.stringify(run)).toBe(before);
      }),
      { numRuns: 50 },
    );
  });

  test('is the same with a withdrawn edit as if it had never been made', () => {
    fc.assert(
      fc.property(anyRun, fc.array(anyChange, { maxLength: 4 }), anyChange, fc.nat(4), (run, changes, extra, at) => {
        const others = rawEdits(run, ...changes.filter(({ kind }) => kind !== 'withdraw'));
        const made = rawEdit(run, extra, { id: uuid(0xaaaa), made_seq: 90 });
        const withdrawal = rawEdit(run, { kind: 'withdraw', edit_id: made.id }, { id: uuid(0xbbbb), made_seq: 91 });
        const withBoth = [...others.slice(0, at), made, ...others.slice(at), withdrawal];
        expect(foldRun(run, withBoth)).toEqual(foldRun(run, others));
      }),
      { numRuns: 100 },
    );
  });

  test('a withdrawn withdrawal puts the edit back in force', () => {
    const run = rawTapRun({ times: [0, 2, 4] });
    const out = rawEdit(run, leaveOut(1), { id: uuid(11) });
    const withdrawal = rawEdit(run, { kind: 'withdraw', edit_id: uuid(11) }, { id: uuid(12) });
    const again = rawEdit(run, { kind: 'withdraw', edit_id: uuid(12) }, { id: uuid(13) });
    const isOut = (edits: RawEdit[]) => foldRun(run, edits).marks[1]!.leftOut;
    expect([isOut([out]), isOut([out, withdrawal]), isOut([out, withdrawal, again])]).toEqual([true, false, true]);
  });

  test('a run set aside says why until that is withdrawn, and keeps its marks', () => {
    const run = rawTapRun({ times: [0, 2, 4] });
    const aside = rawEdit(run, { kind: 'set_aside' }, { id: uuid(21), reason: 'bob hit the stand' });
    const back = rawEdit(run, { kind: 'withdraw', edit_id: uuid(21) }, { id: uuid(22) });
    expect(foldRun(run, [aside])).toMatchObject({
      setAside: { editId: uuid(21), reason: 'bob hit the stand' },
      swings: 2,
    });
    expect(foldRun(run, [aside, back]).setAside).toBeNull();
    expect(foldRun(run, []).setAside).toBeNull();
  });

  test('passes over edits of another run', () => {
    const run = rawTapRun({ times: [0, 2, 4] });
    expect(foldRun(run, [rawEdit({ id: uuid(99) }, leaveOut(1))]).marks[1]!.leftOut).toBe(false);
  });

  test('takes the last rig, amplitudes and count, and keeps all notes', () => {
    const run = rawTapRun({ times: [0, 2, 4], note: 'draughty' });
    const rig = stringRig({ label: 'the long one' });
    const view = fold(
      run,
      { kind: 'set_rig', rig: stringRig() },
      { kind: 'set_rig', rig },
      { kind: 'set_amplitudes', amplitudes: [angleReading(0, 12)] },
      { kind: 'note', text: 'window shut' },
      { kind: 'keep_flagged', flag: 'late_first_mark', mark: 0 },
    );
    expect(view).toMatchObject({ rig, amplitudes: [angleReading(0, 12)], notes: ['draughty', 'window shut'] });
    expect(view.kept).toEqual([{ flag: 'late_first_mark', mark: 0 }]);
  });

  test('counts gaps told on the pad and inserted later, both in steps of the mode', () => {
    const run = rawTapRun({
      times: [0, 10, 30, 40],
      capture: { swings_per_mark: 5, missed: [{ before_mark: 2, count: 1 }] },
    });
    expect(swings(run)).toEqual([0, 5, 15, 20]);
    expect(swings(run, { kind: 'insert_gap', before_mark: 3, count: 2 })).toEqual([0, 5, 15, 30]);
  });

  test('leaving out a double renumbers, leaving out a late mark does not', () => {
    expect(swings(rawTapRun({ times: [0, 2, 4, 4.1, 6, 8] }), leaveOut(3))).toEqual([0, 1, 2, null, 3, 4]);
    expect(swings(rawTapRun({ times: [0, 2, 4, 6.5, 8, 10] }), leaveOut(3))).toEqual([0, 1, 2, null, 4, 5]);
  });

  test('two doubles and a late mark in a row keep one step', () => {
    expect(
      swings(rawTapRun({ times: [0, 2, 4, 4.1, 4.2, 6.5, 8, 10, 12] }), leaveOut(3), leaveOut(4), leaveOut(5)),
    ).toEqual([0, 1, 2, null, null, null, 4, 5, 6]);
  });

  test('leaving out the first mark starts the count at the second and moves the amplitude readings along', () => {
    const run = rawTapRun({ times: [0, 2, 4, 6], amplitudes: [angleReading(0, 10), angleReading(3, 9)] });
    const view = fold(run, leaveOut(0));
    expect(view.marks.map(({ swing }) => swing)).toEqual([null, 0, 1, 2]);
    expect(view.amplitudes.map(({ swing }) => swing)).toEqual([-1, 2]);
    expect(view).toMatchObject({ swings: 2, duration: 4 });
  });

  test('re-reading as half swings halves the count and the readings made before it, and only those', () => {
    const run = rawTapRun({ times: [0, 1, 2], amplitudes: [angleReading(2, 9)] });
    const halved: EditChange = { kind: 'reread_as_half_swings' };
    expect(swings(run, halved)).toEqual([0, 0.5, 1]);
    expect(fold(run, halved).amplitudes[0]!.swing).toBe(1);
    const set: EditChange = { kind: 'set_amplitudes', amplitudes: [angleReading(1, 9)] };
    expect(fold(run, halved, set).amplitudes[0]!.swing).toBe(1);
    expect(swings(run, halved, halved)).toEqual([0, 0.5, 1]);
    expect(fold(run, halved, halved).amplitudes[0]!.swing).toBe(1);
  });

  test('setting the swings of marks adds the missing steps where the laps are long', () => {
    const run = rawTapRun({ times: [0, 2, 6, 8, 12.1, 14] });
    expect(swings(run, { kind: 'set_swings', swings: 7 })).toEqual([0, 1, 3, 4, 6, 7]);
    expect(swings(run, { kind: 'set_swings', swings: 10 })).toEqual([0, 1, 4, 5, 8, 10].map(() => expect.any(Number)));
    expect(swings(run, { kind: 'set_swings', swings: 2.5 })).toEqual([0, 0.5, 1, 1.5, 2, 2.5]);
  });

  test('a keyed total counts as the counter said, unless the swings are set', () => {
    expect(fold(rawKeyedRun({ counted_to: 20, first_count: 'one' })).swings).toBe(19);
    expect(fold(rawKeyedRun({ counted_to: 20 }), { kind: 'set_swings', swings: 18 }).swings).toBe(18);
    expect(fold(rawKeyedRun({ counted_to: 20 }), { kind: 'reread_as_half_swings' }).swings).toBe(10);
    expect(fold(rawKeyedRun({ counted_to: 1, first_count: 'one' })).swings).toBeNull();
  });

  test('a gate has its marks in the middle of the blocks, two a swing', () => {
    const view = fold(
      rawGateRun({
        blocks: [
          [0, 0.02],
          [1, 1.04],
          [2, 2.02],
        ],
      }),
    );
    expect(view.marks.map(({ time }) => time)).toEqual([0, 1.01, 2].map((t) => expect.closeTo(t, 9)));
    expect(view.swings).toBe(1);
  });

  test('with every mark left out nothing is counted', () => {
    const view = fold(rawTapRun({ times: [0, 2] }), leaveOut(0), leaveOut(1));
    expect(view).toMatchObject({ swings: null, duration: 0 });
  });
});
