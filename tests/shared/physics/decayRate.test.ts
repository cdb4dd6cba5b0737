import { describe, expect, test } from 'vitest';
import { decayRate, decayShares } from '@shared/physics/decayRate';
import { radians } from '@shared/units/angle';
import reference from '../../reference/decay.json';

/** decay.json: elliptic integrals with 30 digits, ω = 1, so T0 = 2π. */
const T0 = 2 * Math.PI;

describe('decayShares', () => {
  const rows = reference.decay_rate_functions.table.map((row) => ({ ...row, deg: Number(row.theta0_deg) }));
  test.each(rows)('at $deg° are those of the energy a cycle takes away', ({ deg, ...row }) => {
    const shares = decayShares(radians(deg), { viscous: 1, quadratic: 1, dry: 1 }, T0);
    // sin A − A cos A loses digits at small angles, the angle itself near 180°.
    const tolerance = deg > 175 || deg < 5 ? 1e-11 : 1e-12;
    expect(Math.abs(shares.viscous / Number(row.rate_viscous) - 1)).toBeLessThan(tolerance);
    expect(Math.abs(shares.quadratic / Number(row.rate_quadratic) - 1)).toBeLessThan(tolerance);
    expect(Math.abs(shares.dry / Number(row.rate_coulomb) - 1)).toBeLessThan(tolerance);
  });

  test('go over into the small-angle laws', () => {
    const { viscous, quadratic, dry } = decayShares(1e-6, { viscous: 1, quadratic: 1, dry: 1 }, 2);
    expect(viscous / 1e-6).toBeCloseTo(1, 9);
    expect(quadratic / 1e-12 / Math.PI).toBeCloseTo(4 / (3 * Math.PI), 9);
    expect(dry).toBeCloseTo(2, 9);
  });
});

test('decayRate is their sum, and no damping may be negative', () => {
  expect(decayRate(0.2, { viscous: 0.01, quadratic: 0, dry: 0 }, 2)).toBeCloseTo(0.002, 4);
  expect(() => decayRate(0.2, { viscous: -1, quadratic: 0, dry: 0 }, 2)).toThrow(/viscous is -1/);
});
