import { describe, expect, test } from 'vitest';
import { summariseRepeats } from '@shared/analysis/summariseRepeats';

describe('five repeats 2.00 2.02 2.01 1.99 2.03', () => {
  const values = [2.0, 2.02, 2.01, 1.99, 2.03];
  // By hand: mean 2.01, range 0.04, s = 0.0158114, s/√5 = 0.00707107; t95(4) = 2.7764451 (GUM table G.2).
  test('half range states 0.02', () => {
    const { value, expanded_u, u } = summariseRepeats(values, 'half_range')!;
    expect(value).toBeCloseTo(2.01, 12);
    expect(expanded_u).toBeCloseTo(0.02, 12);
    expect(u).toBeCloseTo(0.02 / Math.sqrt(3), 12);
  });

  test('standard error is s/√n, stated twice', () => {
    expect(summariseRepeats(values, 'standard_error')).toMatchObject({
      u: expect.closeTo(0.00707107, 8) as number,
      expanded_u: expect.closeTo(0.01414214, 8) as number,
    });
  });

  test('GUM states it with Student’s factor', () => {
    const { u, dof, coverage_factor, expanded_u } = summariseRepeats(values, 'gum')!;
    expect(u).toBeCloseTo(0.00707107, 8);
    expect(dof).toBeCloseTo(4, 9);
    expect(coverage_factor).toBeCloseTo(2.7764451, 6);
    expect(expanded_u).toBeCloseTo(2.7764451 * 0.00707107, 7);
  });

  test('what all repeats share is not averaged', () => {
    const { u, dof } = summariseRepeats(values, 'gum', 0.01)!;
    expect(u).toBeCloseTo(Math.hypot(0.00707107, 0.01), 8);
    // Welch–Satterthwaite: (1.5e-4)²/(2.5e-9/4) = 36.
    expect(dof).toBeCloseTo(36, 6);
  });
});

test('equal repeats have no scatter, and one is not enough', () => {
  expect(summariseRepeats([2, 2, 2], 'gum')).toMatchObject({ value: 2, u: 0, expanded_u: 0 });
  expect(summariseRepeats([2], 'gum')).toBeUndefined();
});
