import ellipk from '@stdlib/math-base-special-ellipk';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { periodRatio, periodRatioSlope } from '@shared/physics/periodRatio';
import { radians } from '@shared/units/angle';
import reference from '../../reference/period.json';
import series from '../../reference/series-and-approximations.json';

/** period.json: 1/agm(1, cos(A/2)) with 60 digits (mpmath). Amplitudes are in degrees and become doubles in rad here. */
const rows = reference.table.map((row) => ({
  deg: Number(row.theta0_deg),
  ratio: Number(row.ratio),
  slope: Number(row.dratio_dtheta0),
}));
const relative = (found: number, wanted: number) => Math.abs(found / wanted - 1);

describe('periodRatio', () => {
  test.each(rows.filter(({ deg }) => deg < 175))(
    'agrees with 60-digit arithmetic to 1e-14 at $deg°',
    ({ deg, ratio }) => {
      expect(relative(periodRatio(radians(deg)), ratio)).toBeLessThanOrEqual(1e-14);
    },
  );

  test.each(rows.filter(({ deg }) => deg >= 175))(
    'agrees with 60-digit arithmetic to 1e-12 at $deg°',
    ({ deg, ratio }) => {
      expect(relative(periodRatio(radians(deg)), ratio)).toBeLessThanOrEqual(1e-12);
    },
  );

  test.each([
    [10, 1.0019071881],
    [60, 1.0731820071],
    [90, 1.180340599],
    [150, 1.7622037295],
    [179, 3.9010651603],
    [179.9, 5.366867109],
  ])('agrees with a published ten-digit table at %d°', (deg, published) => {
    expect(Math.abs(periodRatio(radians(deg)) - published)).toBeLessThanOrEqual(1e-10);
  });

  test('agrees with the complete elliptic integral of an independent library to 1e-13 up to 175°', () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-3, max: radians(175), noNaN: true }), (amplitude) => {
        const byIntegral = (2 / Math.PI) * ellipk(Math.sin(amplitude / 2) ** 2);
        expect(relative(periodRatio(amplitude), byIntegral)).toBeLessThanOrEqual(1e-13);
      }),
    );
  });

  test('agrees with thirteen terms of the power series (OEIS A223067/A223068) up to 40°', () => {
    const terms = series.series.coefficients.map((fraction) => {
      const [over, under = '1'] = fraction.split('/');
      return Number(over) / Number(under);
    });
    for (const deg of [1, 5, 10, 20, 40]) {
      const sum = terms.reduce((total, c, n) => total + c * radians(deg) ** (2 * n), 0);
      expect(relative(periodRatio(radians(deg)), sum)).toBeLessThanOrEqual(2e-14);
    }
  });

  test('is exactly 1 at rest and refuses amplitudes that are not from 0 to below π', () => {
    expect(periodRatio(0)).toBe(1);
    for (const amplitude of [-0.1, Math.PI, NaN, Infinity]) expect(() => periodRatio(amplitude)).toThrow(RangeError);
  });
});

describe('periodRatioSlope', () => {
  test.each(rows.filter(({ deg }) => deg < 175))(
    'agrees with 60-digit arithmetic to 2e-14 at $deg°',
    ({ deg, slope }) => {
      expect(relative(periodRatioSlope(radians(deg)), slope)).toBeLessThanOrEqual(2e-14);
    },
  );

  test.each(rows.filter(({ deg }) => deg >= 175))(
    'agrees to 3e-12 at $deg°, where the rounding of the angle counts',
    ({ deg, slope }) => {
      expect(relative(periodRatioSlope(radians(deg)), slope)).toBeLessThanOrEqual(3e-12);
    },
  );

  test('is 0 at rest', () => {
    expect(periodRatioSlope(0)).toBe(0);
  });
});
