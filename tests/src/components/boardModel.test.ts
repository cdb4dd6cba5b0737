import { expect, it } from 'vitest';
import type { BoardPoint } from '@shared/schemas/accounts';
import { boardModel, periodPlaces } from '@/components/board/boardModel';
import { boardScale } from '@/composables/useBoardScale';

const point = (bench: number, parts: Partial<BoardPoint> = {}): BoardPoint => ({
  run_id: `018f0000-0000-7000-8000-0000000000${String(bench).padStart(2, '0')}`,
  bench,
  small_period_s: { value: 2 + bench / 1000, u: 0.004, expanded_u: 2 * 0.004 },
  length_m: 1,
  open_flags: 0,
  ...parts,
});

it('runs without T0 are counted and not drawn', () => {
  const model = boardModel([point(1), point(2, { small_period_s: null })]);
  expect(model.without).toBe(1);
  expect(model.summary?.runs).toBe(1);
});

it('a run with an open flag is counted as one to show hollow, unless it has no T0 to show', () => {
  const points = [point(1), point(2, { open_flags: 1 }), point(3, { open_flags: 2, small_period_s: null })];
  expect(boardModel(points).flagged).toBe(1);
});

it('lengths that differ are told, those that agree within a hundredth are not', () => {
  expect(boardModel([point(1), point(2, { length_m: 0.55 })]).lengths_m).toEqual([0.55, 1]);
  expect(boardModel([point(1), point(2, { length_m: 1.004 })]).lengths_m).toBeUndefined();
});

it('the headline has two digits of the spread', () => {
  // Quartiles of 2.001 … 2.009 are 0.004 apart: half of that is 0.002, whose second digit is the fourth place.
  const { summary } = boardModel(Array.from({ length: 9 }, (_, i) => point(i + 1)));
  expect(periodPlaces(summary!)).toBe(4);
});

it('one bench alone takes the places of its own uncertainty', () => {
  expect(
    periodPlaces(boardModel([point(1, { small_period_s: { value: 2.01, u: 0.03, expanded_u: 2 * 0.03 } })]).summary!),
  ).toBe(3);
});

it('axis numbers stay at a fortieth of the picture on 4:3 and readable on a phone', () => {
  expect(30 * boardScale(1024, 768)).toBeGreaterThanOrEqual(768 / 40);
  expect(30 * boardScale(1920, 1080)).toBe(30);
  expect(26 * boardScale(390, 844)).toBeGreaterThanOrEqual(13);
});
