import { describe, expect, test } from 'vitest';
import * as corrections from '@shared/physics/corrections';
import { smallPeriodFrom } from '@shared/physics/gravity';
import reference from '../../reference/corrections.json';

/** corrections.json: 1 m to the centre of a steel ball of 15 mm radius, string 0.3 g, g = 9.80665. */
const mass = Number(reference.bob_mass_kg);
const smallPeriod = smallPeriodFrom(1, 9.80665);
const ball = { radius: 0.015, bobDensity: 7850, smallPeriod };
const wanted = (key: keyof typeof reference.dT_over_T) => Number(reference.dT_over_T[key]);

describe('each correction of the standard example has its size and its sign', () => {
  test.each([
    ['string_mass', corrections.stringMass(0.0003, mass), -1],
    ['buoyancy', corrections.buoyancy(7850), 1],
    ['added_mass_stokes', corrections.addedMass(ball), 1],
    ['support_compliance_1e4_N_per_m', corrections.yieldingSupport(mass, 1e4, 1, 9.80665), 1],
  ] as const)('%s', (key, found, sign) => {
    expect(found / wanted(key)).toBeCloseTo(1, 7);
    expect(Math.sign(found)).toBe(sign);
  });

  test('air without viscosity adds half of what it displaces', () => {
    expect(corrections.addedMass({ ...ball, airViscosity: 1e-30 }) / wanted('added_mass_inviscid')).toBeCloseTo(1, 7);
  });

  test('penetration depth, κ, viscous and quadratic damping', () => {
    expect(corrections.penetrationDepth(smallPeriod)).toBeCloseTo(Number(reference.penetration_depth_m), 10);
    expect(corrections.addedMassFactor(ball)).toBeCloseTo(Number(reference.added_mass_kappa), 7);
    expect(corrections.viscousDamping(ball) / Number(reference.stokes_viscous_gamma_per_s)).toBeCloseTo(1, 6);
    expect(corrections.quadraticDamping(ball, 1) / Number(reference.quadratic_beta_Cd_0p5)).toBeCloseTo(1, 7);
  });
});

test('light bobs are carried by the air far more than steel', () => {
  // ρ/2ρbob: wood of 600 kg/m³ 1.0e-3, hollow plastic ball of 84 kg/m³ 7e-3.
  expect(corrections.buoyancy(600)).toBeCloseTo(1.0e-3, 5);
  expect(corrections.buoyancy(84)).toBeCloseTo(7.2e-3, 4);
});

test('arguments out of range are named', () => {
  expect(() => corrections.buoyancy(1)).toThrow(/bobDensity is 1 kg/);
  expect(() => corrections.stringMass(-1, 1)).toThrow(/stringMass is -1/);
  expect(() => corrections.yieldingSupport(1, 0, 1, 9.8)).toThrow(/stiffness is 0/);
});
