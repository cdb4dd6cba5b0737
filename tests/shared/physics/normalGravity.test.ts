import { describe, expect, test } from 'vitest';
import { normalGravity } from '@shared/physics/normalGravity';
import { radians } from '@shared/units/angle';
import reference from '../../reference/gravity.json';

describe('normalGravity', () => {
  // gravity.json: Somigliana's formula and the height series with 60 digits, from the defining constants.
  const rows = reference.table.flatMap((row) =>
    (
      [
        [0, row.WGS84_somigliana],
        [100, row.WGS84_h100],
        [1000, row.WGS84_h1000],
        [3000, row.WGS84_h3000],
      ] as const
    ).map(([height, g]) => ({ latitude: Number(row.lat_deg), height, g: Number(g) })),
  );
  test.each(rows)('at $latitude°, $height m', ({ latitude, height, g }) => {
    expect(Math.abs(normalGravity(radians(latitude), height) - g)).toBeLessThan(2e-12);
  });

  test('has the published values of WGS 84 at the equator and the poles, m/s²', () => {
    expect(normalGravity(0)).toBeCloseTo(9.7803253359, 10);
    expect(normalGravity(Math.PI / 2)).toBeCloseTo(9.8321849379, 10);
    // Test value of a published geodesy program at 59.91° N.
    expect(normalGravity(radians(59.91))).toBeCloseTo(9.81910618638375, 12);
  });

  test('is what absolute stations measured, within the 50 mGal it is known to', () => {
    // BIPM Sèvres A 2001, 980 925 701.2(5.5) µGal; station about 66 m up (from memory).
    expect(Math.abs(normalGravity(radians(48.829), 66) - 9.809257012)).toBeLessThan(5e-4);
    // NBS Gaithersburg 1965/66, 9.801018(3) m/s²; about 130 m up (from memory).
    expect(Math.abs(normalGravity(radians(39.13), 130) - 9.801018)).toBeLessThan(6e-4);
  });

  test('is the same north and south, and refuses what is no place', () => {
    expect(normalGravity(radians(-33), 20)).toBe(normalGravity(radians(33), 20));
    expect(() => normalGravity(2)).toThrow(/latitude is 2 rad/);
    expect(() => normalGravity(0, 20_000)).toThrow(/height is 20000 m/);
  });
});
