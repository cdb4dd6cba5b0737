import { describe, expect, test } from 'vitest';
import { gravityFrom, smallPeriodFrom, STANDARD_GRAVITY } from '@shared/physics/gravity';
import { expectedPeriod, reducedLength } from '@shared/physics/reducedLength';
import { pivotToCentre } from '@shared/physics/rigLength';
import corrections from '../../reference/corrections.json';
import physical from '../../reference/physical-pendulum.json';
import { stringRig } from '../../factories/rawRuns';

const bar = (pivot_offset_um: number) =>
  stringRig({ kind: 'bar', length_readings: [], bar_length_um: 1_000_000, pivot_offset_um });
const periodOf = (rig: Parameters<typeof reducedLength>[0]) =>
  smallPeriodFrom(reducedLength(rig)!.value, STANDARD_GRAVITY);

describe('pivotToCentre', () => {
  test.each([
    ['centre', 1_000_000],
    ['top', 985_000],
    ['bottom', 1_015_000],
  ] as const)('adds or takes the radius for a reading to the %s of the bob', (to, um) => {
    const rig = stringRig({ length_readings: [{ to, um }], bob_diameter_um: 30_000 });
    expect(pivotToCentre(rig)!.value).toBeCloseTo(1, 12);
  });

  test('needs no diameter when top and bottom were both read', () => {
    const rig = stringRig({
      length_readings: [
        { to: 'top', um: 985_000 },
        { to: 'bottom', um: 1_015_000 },
      ],
    });
    expect(pivotToCentre(rig)!.value).toBeCloseTo(1, 12);
    expect(pivotToCentre(rig)!.u).toBeCloseTo(0.001 / Math.sqrt(2), 4);
  });

  test('is not known from the top of a bob without its diameter', () => {
    expect(pivotToCentre(stringRig({ length_readings: [{ to: 'top', um: 985_000 }] }))).toBeUndefined();
  });

  test('two readings that differ by more than they claim widen the uncertainty', () => {
    const length_readings = [1_000_000, 1_010_000].map((um) => ({ to: 'centre' as const, um }));
    expect(pivotToCentre(stringRig({ length_readings }))!.u).toBeCloseTo(0.005, 9);
  });
});

describe('reducedLength', () => {
  // physical-pendulum.json: 2π√((kc² + d²)/(g d)) with 20 digits, g = 9.80665.
  test.each(physical.rod_1m)('a 1 m bar hung $d m from its middle has the period of the closed form', ({ d, T }) => {
    expect(periodOf(bar(Math.round(Number(d) * 1e6)))).toBeCloseTo(Number(T), 10);
  });

  test('a disc and a ring on their rims have the periods of the closed forms', () => {
    const round = (kind: 'disc' | 'ring') => stringRig({ kind, length_readings: [], bar_length_um: 200_000 });
    expect(periodOf(round('disc'))).toBeCloseTo(Number(physical['disc_R_0.1_pivot_on_rim']), 12);
    expect(periodOf(round('ring'))).toBeCloseTo(Number(physical['ring_R_0.1_pivot_on_rim']), 12);
  });

  test('a bob of 15 mm radius at 1 m lengthens T by the finite-bob term', () => {
    const ratio = periodOf(stringRig({ bob_diameter_um: 30_000 })) / periodOf(stringRig());
    // The reference is the first-order term r²/(5L²); the next one is 1e-9.
    expect(ratio - 1).toBeCloseTo(Number(corrections.dT_over_T.finite_bob), 8);
  });

  test.each(['bar_bob', 'other'] as const)('is not known for a rig of kind %s', (kind) => {
    expect(reducedLength(stringRig({ kind, bar_length_um: 1_000_000, pivot_offset_um: 400_000 }))).toBeUndefined();
  });

  test('is not known for a bar on its middle or without a stated pivot', () => {
    expect(reducedLength(bar(0))).toBeUndefined();
    expect(reducedLength({ ...bar(1), pivot_offset_um: null })).toBeUndefined();
  });

  test('at the least period a wrong pivot offset does no harm, so only the length of the bar counts', () => {
    // d = ℓ/√12: ∂/∂d = 0 and ∂/∂ℓ = 1/√3.
    expect(reducedLength(bar(288_675))!.u).toBeCloseTo(0.001 / Math.sqrt(3), 7);
  });
});

test('gravityFrom undoes smallPeriodFrom', () => {
  expect(gravityFrom(smallPeriodFrom(0.7, 9.81), 0.7)).toBeCloseTo(9.81, 12);
});

test('expectedPeriod of 1 m is 2.006 s and allows for gravity from the equator to the poles', () => {
  const { value, u } = expectedPeriod(stringRig({ length_u_um: 0 }))!;
  expect(value).toBeCloseTo(2.00641, 5);
  for (const g of [9.78, 9.832]) expect(Math.abs(smallPeriodFrom(1, g) - value)).toBeLessThan(1.8 * u);
});
