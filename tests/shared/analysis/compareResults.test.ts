import { expect, test } from 'vitest';
import { compareGravity, enScore } from '@shared/analysis/compareResults';
import { radians } from '@shared/units/angle';

test('enScore is the difference over the expanded uncertainty of it, with its sign', () => {
  // ISO 13528: E_n = (x − X)/√(U_x² + U_X²); 3–4–5 by hand.
  expect(enScore({ value: 9.8, expanded_u: 0.03 }, { value: 9.85, expanded_u: 0.04 })).toBeCloseTo(-1, 12);
  expect(enScore({ value: 1, expanded_u: 0 }, { value: 1, expanded_u: 0 })).toBeUndefined();
});

test('compareGravity takes normal gravity of the place and says whether they agree', () => {
  const place = [radians(52.3806), 100] as const;
  // gravity.json: 9.81249964292951 at 52.3806° and 100 m.
  const good = compareGravity({ value: 9.79, expanded_u: 0.03 }, ...place);
  expect(good.normal.value).toBeCloseTo(9.81249964292951, 11);
  expect(good.difference).toBeCloseTo(-0.0225, 5);
  expect(good.en).toBeCloseTo(-0.0224996 / Math.hypot(0.03, 0.0008), 3);
  expect(good.agrees).toBe(true);
  expect(compareGravity({ value: 9.7, expanded_u: 0.03 }, ...place).agrees).toBe(false);
});
