import { expect, it } from 'vitest';
import type { Flag } from '@shared/schemas/analysis';
import { EditChange } from '@shared/schemas/edit';
import { editFor, readSwings, type Choice } from '@/components/run/flagChoices';

const flag = (parts: Partial<Flag>): Flag => ({
  code: 'double',
  mark: 7,
  seen: {},
  choices: [],
  answered: false,
  ...parts,
});

const CHOICES: Choice[] = [
  'leave_out_mark',
  'insert_gap',
  'keep_part',
  'reread_as_half_swings',
  'set_swings',
  'keep_flagged',
];

it.each(CHOICES)('the edit made by %s is one the server takes', (choice) => {
  const change = editFor(flag({ seen: { from_mark: 0, to_mark: 11 } }), choice, 19);
  expect(EditChange.safeParse(change).error).toBeUndefined();
  expect(change?.kind).toBe(choice);
});

it('leaving out is about the very mark the flag names', () => {
  expect(editFor(flag({ mark: 12 }), 'leave_out_mark')).toEqual({ kind: 'leave_out_mark', mark: 12 });
});

it('a gap stands before the mark, as wide as was seen', () => {
  expect(editFor(flag({ code: 'missed', mark: 5, seen: { count: 2 } }), 'insert_gap')).toEqual({
    kind: 'insert_gap',
    before_mark: 5,
    count: 2,
  });
});

it('a flag about the whole run leaves no mark out', () => {
  expect(editFor(flag({ mark: null }), 'leave_out_mark')).toBeUndefined();
});

it('swings are read with point or comma, in steps of a half, and nothing else', () => {
  expect(readSwings('19')).toBe(19);
  expect(readSwings('19,5')).toBe(19.5);
  for (const typed of ['', '0', '19.3', 'twenty', '1001', '-2']) expect(readSwings(typed)).toBeUndefined();
});
