import { expect, test } from 'vitest';
import { amplitudeAt } from '@shared/physics/amplitudeCurve';
import { fitAmplitudes } from '@shared/physics/fitAmplitudes';
import { degrees, radians } from '@shared/units/angle';

const points = (...readings: [swing: number, deg: number, uDeg?: number][]) =>
  readings.map(([swing, deg, u = 1]) => ({ swing, amplitude: radians(deg), u: radians(u) }));

test('two readings give an exponential through both', () => {
  const { curve, decayKnown } = fitAmplitudes(points([0, 20], [20, 5]))!;
  expect(decayKnown).toBe(true);
  expect(degrees(amplitudeAt(curve, 10))).toBeCloseTo(10, 6);
});

test.each([
  // Closed forms of dA/dn = −c A^(1−law): straight, hyperbola.
  { name: 'dry friction', law: 1, readings: [40, 30, 20, 10] },
  { name: 'drag as the square of speed', law: -1, readings: [60, 30, 20, 15] },
])('four exact readings of $name bend the law to $law', ({ law, readings }) => {
  const { curve } = fitAmplitudes(points(...readings.map((deg, i): [number, number, number] => [10 * i, deg, 0.05])))!;
  expect(curve.law).toBeCloseTo(law, 1);
  expect(degrees(amplitudeAt(curve, 15))).toBeCloseTo(law === 1 ? 25 : 24, 1);
});

test('one reading gives a constant amplitude, decay not known, and a doubt about it', () => {
  const { curve, decayKnown, doubts } = fitAmplitudes(points([0, 20]))!;
  expect(decayKnown).toBe(false);
  expect(amplitudeAt(curve, 0)).toBe(amplitudeAt(curve, 20));
  expect(doubts.map(({ term }) => term)).toEqual(['amplitude', 'decay']);
});

test('readings that grow give a constant between them', () => {
  const { curve } = fitAmplitudes(points([0, 9], [20, 11]))!;
  expect(degrees(amplitudeAt(curve, 20))).toBeCloseTo(10, 9);
});

test('readings that scatter more than they claim widen the doubt', () => {
  const spread = (off: number) => {
    const readings = points(
      [0, 20, 0.1],
      [5, 18 + off, 0.1],
      [10, 16 - off, 0.1],
      [15, 14.4 + off, 0.1],
      [20, 13, 0.1],
    );
    const amplitude = fitAmplitudes(readings)!.doubts.find(({ term }) => term === 'amplitude')!;
    return Math.abs(amplitude.curves[0]!.first - amplitude.curves[1]!.first);
  };
  expect(spread(1)).toBeGreaterThan(5 * spread(0));
});

test('no reading, no curve', () => {
  expect(fitAmplitudes([])).toBeUndefined();
});
