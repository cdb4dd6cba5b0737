import { expect, test } from 'vitest';
import { periodRatio } from '@shared/physics/periodRatio';
import { radians } from '@shared/units/angle';
import { PERIOD_APPROXIMATIONS } from '../../support/periodApproximations';
import reference from '../../reference/series-and-approximations.json';

/**
 * Twenty formulas by other people, each off by what was worked out for it with 60 digits: one wrong digit of
 * periodRatio would show against all of them.
 */
const rows = reference.approximations
  .filter(({ key }) => key in PERIOD_APPROXIMATIONS)
  .flatMap(({ key, formula, relative_error }) =>
    Object.entries(relative_error).map(([deg, error]) => ({ key, formula, deg: Number(deg), error: Number(error) })),
  )
  // Beyond its range a formula has no error to compare.
  .filter(({ error }) => Number.isFinite(error));

test('twenty formulas at fourteen amplitudes are compared', () => {
  expect(new Set(rows.map((row) => row.key)).size).toBe(20);
});

test.each(rows)('$key, $formula, is off by $error at $deg°', ({ key, deg, error }) => {
  const amplitude = radians(deg);
  const found = PERIOD_APPROXIMATIONS[key]!(amplitude) / periodRatio(amplitude) - 1;
  // Six digits are given; below 1e-13 the rounding of doubles is all there is.
  expect(Math.abs(found - error)).toBeLessThan(1e-5 * Math.abs(error) + 2e-14 + (deg > 175 ? 1e-13 : 0));
});
