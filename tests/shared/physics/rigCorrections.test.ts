import { describe, expect, test } from 'vitest';
import { gravityFrom, smallPeriodFrom } from '@shared/physics/gravity';
import { reducedLength } from '@shared/physics/reducedLength';
import { rigCorrections } from '@shared/physics/rigCorrections';
import type { Rig } from '@shared/schemas/rig';
import reference from '../../reference/corrections.json';
import { stringRig } from '../../factories/rawRuns';

/** corrections.json: 1 m to the centre of a steel ball of 15 mm radius (111 g), string 0.3 g, support 1e4 N/m. */
const example = stringRig({
  bob_diameter_um: 30_000,
  bob_mass_mg: Math.round(Number(reference.bob_mass_kg) * 1e6),
  string_mass_mg: 300,
  support_stiffness_n_per_m: 10_000,
});
const T0 = smallPeriodFrom(1, 9.80665);
const found = (rig: Rig) => rigCorrections(rig, T0)!;
const effect = (rig: Rig, term: string) => found(rig).effects.find((one) => one.term === term)?.period;

describe('the standard example has every correction with its size and sign', () => {
  test.each([
    ['finite_bob', 'finite_bob'],
    ['string_mass', 'string_mass'],
    ['buoyancy', 'buoyancy'],
    ['added_mass', 'added_mass_stokes'],
    ['yielding_support', 'support_compliance_1e4_N_per_m'],
  ] as const)('%s', (term, key) => {
    // The mass is kept in whole milligrams, 5e-6 of it; the support carries the ball's own moment too, 9e-5 of its line.
    const places = term === 'yielding_support' ? 3 : 5;
    expect(effect(example, term)! / Number(reference.dT_over_T[key])).toBeCloseTo(1, places);
  });

  test('the largest comes first', () => {
    const sizes = found(example).effects.map(({ period }) => Math.abs(period));
    expect(sizes).toEqual([...sizes].sort((a, b) => b - a));
    expect(found(example).effects[0]!.term).toBe('string_mass');
  });
});

describe('a pendulum made with the effects gives its g back only when they are counted', () => {
  const x = reference.dT_over_T;
  const all = [x.finite_bob, x.string_mass, x.buoyancy, x.added_mass_stokes, x.support_compliance_1e4_N_per_m];
  const period = all.reduce((t, effect) => t * (1 + Number(effect)), T0);

  test('counted, g is back to 5e-8; the finite bob is in the reduced length and counts once', () => {
    const g = gravityFrom(period, reducedLength(example)!.value) * found(example).factor;
    expect(g / 9.80665 - 1).toBeCloseTo(0, 7);
  });

  test.each([
    ['a bob taken for a point', { bob_diameter_um: null }, -1],
    ['a string taken for massless', { string_mass_mg: undefined }, 1],
    ['a support taken for firm', { support_stiffness_n_per_m: undefined }, -1],
    ['no air', { bob_shape: 'disc' }, -1],
  ] as const)('%s leaves g off to its own side', (_, without, sign) => {
    const rig = { ...example, ...without };
    const g = gravityFrom(period, reducedLength(rig)!.value) * found(rig).factor;
    expect(Math.sign(g / 9.80665 - 1)).toBe(sign);
    expect(Math.abs(g / 9.80665 - 1)).toBeGreaterThan(4e-5);
  });
});

describe('each line is as unsure as what it is made of', () => {
  test('air: 5 % for its density, 10 % for the coat, and the ball 3.3 % across', () => {
    const exact = found({ ...example, length_u_um: 0, mass_u_mg: 0 }).u.air;
    const [buoyancy, added] = [Number(reference.dT_over_T.buoyancy), Number(reference.dT_over_T.added_mass_stokes)];
    // 0.0577/1.2 of both lines, and a tenth of the second; g takes twice.
    expect(exact).toBeCloseTo(2 * Math.hypot((0.05774 / 1.2) * (buoyancy + added), 0.1 * added), 8);
    // 1 mm on 30 mm is 10 % of the volume and so of the buoyancy.
    expect(found({ ...example, length_u_um: 1_000, mass_u_mg: 0 }).u.air).toBeGreaterThan(2 * 0.1 * buoyancy);
  });

  test('string: a tenth of a gram on 0.3 g is a third of the line', () => {
    expect(found(example).u.string).toBeCloseTo(((2 * 0.1) / 0.3) * 2.25e-4, 6);
    expect(found({ ...example, mass_u_mg: 10 }).u.string).toBeCloseTo(((2 * 0.01) / 0.3) * 2.25e-4, 7);
  });
});

test('a hub shows its size for a 1 m rod with a 0.1 kg bob: 1e-4 kg m² is 0.04 % of T', () => {
  // The rod 0.05 kg from pivot to tip. 1e-4/(2 · (0.1·1² + 0.05·1²/3)): 4.3e-4.
  const rod = stringRig({
    kind: 'bar_bob',
    bar_length_um: 1_000_000,
    pivot_offset_um: 500_000,
    bar_mass_mg: 50_000,
    bob_mass_mg: 100_000,
    hub_inertia_g_mm2: 100_000,
  });
  expect(effect(rod, 'hub')).toBeCloseTo(4.28e-4, 6);
  expect(found(rod).factor).toBe(1);
});

test.each([
  ['without its mass nothing but the size of the bob is told', { bob_mass_mg: undefined }, ['finite_bob']],
  ['a balloon is past these formulas', { bob_mass_mg: 100, string_mass_mg: undefined }, ['finite_bob']],
  ['a disc leaves out the air', { bob_shape: 'disc' as const }, ['string_mass', 'finite_bob']],
])('%s', (_, parts, terms) => {
  const rig = { ...example, support_stiffness_n_per_m: undefined, ...parts };
  expect(found(rig).effects.map(({ term }) => term)).toEqual(terms);
});
