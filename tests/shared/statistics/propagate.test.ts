import { expect, test } from 'vitest';
import { propagate } from '@shared/statistics/propagate';

const of = (value: number, u: number) => ({ value, u });

test('a product shares relative uncertainties, each with its sign', () => {
  const { value, shares } = propagate({ a: of(3, 0.03), b: of(2, 0.1) }, ({ a, b }) => a / b);
  expect(value).toBe(1.5);
  expect(shares.a).toBeCloseTo(0.03 / 2, 8);
  // Differences over a thousandth: right to a millionth.
  expect(shares.b).toBeCloseTo(-(0.1 * 3) / 4, 6);
});

test('what cancels, or is exact, brings nothing', () => {
  const { shares } = propagate({ a: of(3, 0.1), b: of(2, 0) }, ({ a, b }) => (a * b) / a);
  expect(Math.abs(shares.a)).toBeLessThan(1e-13);
  expect(shares.b).toBe(0);
});

test('a quantity at 0 is never moved below it', () => {
  const { shares } = propagate({ hub: of(0, 0.2) }, ({ hub }) => 4 + Math.sqrt(hub ** 2));
  expect(shares.hub).toBeCloseTo(0.2, 10);
  propagate({ hub: of(0, 0.2) }, ({ hub }) => {
    expect(hub).toBeGreaterThanOrEqual(0);
    return hub;
  });
});

test('GUM H.2: R = V cos φ / I of the worked example, without its correlations', () => {
  // JCGM 100:2008, H.2, table H.2. Uncorrelated, the shares are the partial derivatives times u.
  const given = { V: of(4.999, 0.0032), I: of(19.661e-3, 0.0095e-3), phi: of(1.04446, 0.00075) };
  const { value, shares } = propagate(given, ({ V, I, phi }) => (V * Math.cos(phi)) / I);
  expect(value).toBeCloseTo(127.732, 2);
  expect(shares.V).toBeCloseTo((0.0032 * 127.732) / 4.999, 4);
  expect(shares.I).toBeCloseTo((-0.0095 * 127.732) / 19.661, 4);
  expect(shares.phi).toBeCloseTo(-219.847 * 0.00075, 4);
});
