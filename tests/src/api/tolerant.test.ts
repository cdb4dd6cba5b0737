import { expect, it } from 'vitest';
import { readTolerantly } from '@/api/tolerant';
import { BoardAnswer, MeAnswer } from '@shared/schemas/accounts';
import { FeedAnswer } from '@shared/schemas/sync';
import { feedAnswer, feedRun, rawRun, student } from '../support/samples';

it('fields unknown here are passed over at any depth, and what is known comes through', () => {
  const known = feedAnswer([feedRun(rawRun()), feedRun(rawRun())], 4);
  const newer = {
    ...known,
    weather: 'windy',
    items: known.items.map((item) => ({ ...item, badge: 1, receipt: { ...receiptOf(item), paper: 'blue' } })),
  };
  expect(readTolerantly(FeedAnswer, newer)).toEqual(known);
  expect(newer.weather).toBe('windy');
});

it('fields unknown here within one of several kinds are passed over', () => {
  const me = student(3);
  expect(readTolerantly(MeAnswer, { me: { ...me, class: { ...classOf(me), room: '2.14' } } })).toEqual({ me });
});

it('what lacks a known field is not an answer, whatever else it says', () => {
  expect(readTolerantly(MeAnswer, { ok: true })).toBeUndefined();
  expect(readTolerantly(BoardAnswer, { class_name: '11B', extra: 1 })).toBeUndefined();
  expect(readTolerantly(MeAnswer, undefined)).toBeUndefined();
});

const receiptOf = (item: object) => (item as { receipt: object }).receipt;
const classOf = (me: object) => (me as { class: object }).class;
