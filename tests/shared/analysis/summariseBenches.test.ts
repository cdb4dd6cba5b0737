import { expect, it } from 'vitest';
import { summariseBenches, type BenchDot } from '@shared/analysis/summariseBenches';

const dot = (bench: number, period_s: number, expanded_u_s = 0.008): BenchDot => ({
  id: `${bench}-${period_s}`,
  bench,
  period_s,
  expanded_u_s,
  length_m: 1,
  open_flags: 0,
});

it('a bench has one vote however many runs it hands in', () => {
  const eager = [2.1, 2.1, 2.1, 2.1, 2.1].map((period) => dot(1, period));
  const summary = summariseBenches([...eager, dot(2, 2.0), dot(3, 2.01)])!;
  expect(summary.median_s).toBe(2.01);
});

it('the spread of five benches is where their middle half lies', () => {
  const summary = summariseBenches([2.0, 2.01, 2.02, 2.03, 2.04].map((period, i) => dot(i + 1, period)))!;
  expect(summary.spreadIs).toBe('half');
  expect([summary.low_s, summary.high_s]).toEqual([2.01, 2.03]);
});

it('the spread of three benches is all of them', () => {
  const summary = summariseBenches([2.0, 2.01, 2.04].map((period, i) => dot(i + 1, period)))!;
  expect(summary.spreadIs).toBe('all');
  expect([summary.low_s, summary.high_s]).toEqual([2.0, 2.04]);
});

it('a bench that counted half swings stands beyond the picture and is not left out', () => {
  const good = [2.0, 2.004, 2.006, 2.009, 2.012].map((period, i) => dot(i + 1, period));
  const summary = summariseBenches([...good, dot(6, 1.003)])!;
  expect([...summary.beyond].map(({ bench }) => bench)).toEqual([6]);
  expect(summary.lanes.map(({ bench }) => bench)).toEqual([1, 2, 3, 4, 5, 6]);
  expect(summary.range_s[0]).toBeGreaterThan(1.9);
});

it('the range holds every bar of a class that agrees', () => {
  const dots = [2.0, 2.004, 2.006, 2.009].map((period, i) => dot(i + 1, period, 0.006));
  const { range_s, beyond } = summariseBenches(dots)!;
  expect(beyond.size).toBe(0);
  expect(range_s[0]).toBeLessThan(2.0 - 0.006);
  expect(range_s[1]).toBeGreaterThan(2.009 + 0.006);
});

it('no run makes no summary', () => {
  expect(summariseBenches([])).toBeUndefined();
});
