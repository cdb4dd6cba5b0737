import { describe, expect, test } from 'vitest';
import { amplitudeAt } from '@shared/physics/amplitudeCurve';
import { meanPeriodRatio, smallPeriodsElapsed } from '@shared/physics/meanPeriodRatio';
import { periodRatio } from '@shared/physics/periodRatio';
import { degrees, radians } from '@shared/units/angle';
import decay from '../../reference/decay.json';

const LAWS: Record<string, number> = { exponential: 0, linear: 1, hyperbolic: -1 };
const rows = decay.mean_square_amplitude.map((row) => ({
  law: row.law,
  first: Number(row.A1_deg),
  last: Number(row.A2_deg),
  rms: Number(row.rms_deg),
}));

test.each(rows)(
  '$law decay from $first° to $last° has the mean square of its closed form',
  ({ law, first, last, rms }) => {
    const curve = { from: 0, to: 1, first: radians(first), last: radians(last), law: LAWS[law]! };
    const n = 20_000;
    const squares = Array.from({ length: n }, (_, i) => amplitudeAt(curve, (i + 0.5) / n) ** 2);
    expect(degrees(Math.sqrt(squares.reduce((a, b) => a + b) / n))).toBeCloseTo(rms, 7);
  },
);

describe('meanPeriodRatio', () => {
  test('of 20° falling to 12° is the series averaged over an exponential, and not the ratio at release', () => {
    // ⟨A^2n⟩ = (A1^2n − A2^2n)/(2n ln(A1/A2)); coefficients 1/16, 11/3072, 173/737280.
    const [first, last] = [radians(20), radians(12)];
    const mean = (power: number) => (first ** power - last ** power) / (power * Math.log(first / last));
    const series = mean(2) / 16 + (11 / 3072) * mean(4) + (173 / 737280) * mean(6);
    expect(meanPeriodRatio({ from: 0, to: 30, first, last, law: 0 }, 0, 30) - 1).toBeCloseTo(series, 7);
    expect(periodRatio(first) - 1 - series).toBeGreaterThan(0.0028);
  });

  test('of a constant amplitude is the ratio at that amplitude', () => {
    const curve = { from: 0, to: 0, first: radians(90), last: radians(90), law: 0 };
    expect(meanPeriodRatio(curve, 3, 17)).toBeCloseTo(1.18034059902, 11);
  });
});

test('smallPeriodsElapsed does not depend on where the marks cut the run', () => {
  const curve = { from: 0, to: 20, first: radians(60), last: radians(30), law: -0.5 };
  const whole = smallPeriodsElapsed(curve, [0, 20])[1]!;
  const passes = smallPeriodsElapsed(
    curve,
    Array.from({ length: 41 }, (_, i) => i / 2),
  ).at(-1)!;
  expect(whole).toBeCloseTo(passes, 7);
});

test('amplitudeAt comes to rest after the dry decay has used up the amplitude', () => {
  expect(amplitudeAt({ from: 0, to: 10, first: 0.2, last: 0.1, law: 1 }, 25)).toBe(0);
});
