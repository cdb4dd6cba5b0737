import { describe, expect, test } from 'vitest';
import { gravityFrom, smallPeriodFrom, STANDARD_GRAVITY } from '@shared/physics/gravity';
import { expectedPeriod, reducedLength } from '@shared/physics/reducedLength';
import { missingReadings } from '@shared/physics/rigBody';
import { pivotToCentre } from '@shared/physics/rigLength';
import { canonicalText } from '@shared/schemas/canonical';
import { Rig } from '@shared/schemas/rig';
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

  // physical-pendulum.json: bar 0.12 kg × 0.9 m from its end, ball of 0.5 kg and 30 mm radius at 0.8 m.
  const barAndBob = stringRig({
    kind: 'bar_bob',
    length_readings: [{ to: 'centre', um: 800_000 }],
    bob_diameter_um: 60_000,
    bob_mass_mg: 500_000,
    bar_length_um: 900_000,
    pivot_offset_um: 450_000,
    bar_mass_mg: 120_000,
  });

  test('a bar with a bob has the period of its moments put together', () => {
    expect(periodOf(barAndBob)).toBeCloseTo(Number(physical.rod_plus_bob.T), 12);
  });

  test('something else has the period of its radius of gyration: a bar told as one', () => {
    const other = stringRig({
      kind: 'other',
      length_readings: [],
      centre_distance_um: 500_000,
      gyration_um: Math.round(1e6 / Math.sqrt(12)),
    });
    // The radius is kept in whole micrometres.
    expect(periodOf(other)).toBeCloseTo(Number(physical.rod_1m_about_end), 6);
  });

  test('a wide bar and a thick ring have the moments of the tables', () => {
    // CRC Handbook, "Moment of inertia for various bodies" (from memory): (ℓ² + w²)/12 and (r² + R²)/2.
    const wide = { ...bar(500_000), bar_width_um: 100_000 };
    expect(reducedLength(wide)!.value).toBeCloseTo((1 + 0.01) / 12 / 0.5 + 0.5, 12);
    const ring = stringRig({ kind: 'ring', bar_length_um: 200_000, inner_diameter_um: 160_000, length_readings: [] });
    expect(reducedLength(ring)!.value).toBeCloseTo((0.08 ** 2 + 0.1 ** 2) / 2 / 0.08 + 0.08, 12);
  });

  test('a hub adds its moment and nothing to the pull', () => {
    const { value } = reducedLength({ ...barAndBob, hub_inertia_g_mm2: 1_000_000 })!;
    const { I, equivalent_length } = physical.rod_plus_bob;
    expect(value / Number(equivalent_length)).toBeCloseTo((Number(I) + 1e-3) / Number(I), 9);
  });

  test('what masses and hub are unsure of has a part of its own in the uncertainty', () => {
    const { by } = reducedLength({ ...barAndBob, length_u_um: 0, mass_u_mg: 1_000, hub_inertia_g_mm2: 1_000_000 })!;
    expect(by.length).toBe(0);
    // 10 % of the hub where nothing is said: 1e-4 kg m² over the static moment 0.454 kg m.
    expect(by.hub).toBeCloseTo(1e-4 / 0.454, 9);
    // ∂L/∂m = (I_part/m − L d)/S for either: 1 g moves L by 0.07 and 0.04 mm.
    const L = (0.35258 + 1e-3) / 0.454;
    const perBar = ((0.9 ** 2 / 12 + 0.45 ** 2 - L * 0.45) / 0.454) * 1e-3;
    const perBob = ((0.8 ** 2 + 0.4 * 0.03 ** 2 - L * 0.8) / 0.454) * 1e-3;
    expect(by.mass).toBeCloseTo(Math.hypot(perBar, perBob), 9);
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

describe('missingReadings names what a rig would have to say, in order', () => {
  const blank = (parts: Parameters<typeof stringRig>[0]) => stringRig({ length_readings: [], ...parts });
  test.each([
    ['a string without a length', blank({}), ['length']],
    [
      'a string read to the top of an unknown bob',
      blank({ length_readings: [{ to: 'top', um: 900_000 }] }),
      ['bob_diameter'],
    ],
    ['a bar', blank({ kind: 'bar' }), ['bar_length', 'pivot_offset']],
    ['a bar on its middle', bar(0), ['pivot_offset']],
    ['a bar with a hub', { ...bar(400_000), hub_inertia_g_mm2: 1_000 }, ['bar_mass']],
    [
      'a bar and bob',
      blank({ kind: 'bar_bob', bar_mass_mg: 1_000 }),
      ['length', 'bar_length', 'pivot_offset', 'bob_mass'],
    ],
    ['a disc', blank({ kind: 'disc' }), ['bar_length']],
    [
      'a ring wider inside than outside',
      blank({ kind: 'ring', bar_length_um: 1_000, inner_diameter_um: 2_000 }),
      ['inner_diameter'],
    ],
    ['something else', blank({ kind: 'other' }), ['centre_distance', 'gyration']],
    ['a metre of string', stringRig(), []],
  ] as const)('%s', (_, rig, missing) => {
    expect(missingReadings(rig)).toEqual(missing);
    expect(reducedLength(rig) === undefined).toBe(missing.length > 0);
  });
});

test('a rig of before the masses reads as it was, byte for byte', () => {
  const text = canonicalText(stringRig({ bob_diameter_um: 25_000, label: 'hook 3' }));
  expect(canonicalText(Rig.parse(JSON.parse(text)))).toBe(text);
});
