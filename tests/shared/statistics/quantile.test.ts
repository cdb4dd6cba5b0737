import fc from 'fast-check';
import { median } from 'simple-statistics';
import { expect, it } from 'vitest';
import { quantile } from '@shared/statistics/quantile';

const numbers = fc.array(fc.double({ min: -1e6, max: 1e6, noNaN: true }), { minLength: 1, maxLength: 50 });

it('quantile at a half is the median of simple-statistics', () => {
  fc.assert(
    fc.property(numbers, (values) => {
      expect(quantile(values, 0.5)).toBeCloseTo(median(values), 6);
    }),
  );
});

it('quantile of evenly spaced values is the share of their range', () => {
  // Definition 7 is linear in the rank, so on 0, 1 … n it gives share × n exactly (Hyndman & Fan 1996).
  fc.assert(
    fc.property(fc.integer({ min: 1, max: 200 }), fc.double({ min: 0, max: 1, noNaN: true }), (n, share) => {
      const values = Array.from({ length: n + 1 }, (_, i) => n - i);
      expect(quantile(values, share)).toBeCloseTo(share * n, 9);
    }),
  );
});

it('quantile leaves its argument in the order it came', () => {
  const values = [3, 1, 2];
  quantile(values, 0.5);
  expect(values).toEqual([3, 1, 2]);
});

it('quantile refuses no values and a share beyond 1', () => {
  expect(() => quantile([], 0.5)).toThrow(RangeError);
  expect(() => quantile([1], 1.1)).toThrow('share is 1.1');
});
