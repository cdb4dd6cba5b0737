import { expect, test } from 'vitest';
import { explainingHub } from '@shared/analysis/explainingHub';
import { smallPeriodFrom } from '@shared/physics/gravity';
import { stringRig } from '../../factories/rawRuns';
import physical from '../../reference/physical-pendulum.json';

/** physical-pendulum.json: bar 0.12 kg × 0.9 m from its end, ball of 0.5 kg and 30 mm radius at 0.8 m. */
const rig = stringRig({
  kind: 'bar_bob',
  length_readings: [{ to: 'centre', um: 800_000 }],
  bob_diameter_um: 60_000,
  bob_mass_mg: 500_000,
  bar_length_um: 900_000,
  pivot_offset_um: 450_000,
  bar_mass_mg: 120_000,
  length_u_um: 0,
  mass_u_mg: 0,
});
const [moment, staticMoment] = [Number(physical.rod_plus_bob.I), 0.12 * 0.45 + 0.5 * 0.8];
const standard = { value: 9.80665, u: 0 };

test('a period without a hub needs none', () => {
  const period = { value: Number(physical.rod_plus_bob.T), u: 1e-4, dof: 19 };
  const hub = explainingHub(rig, period, standard)!;
  expect(hub.value).toBeCloseTo(0, 12);
  // I = m d g T²/4π²: 2 I/T for every second.
  expect(hub.u).toBeCloseTo((2 * moment * 1e-4) / period.value, 9);
  expect(hub.dof).toBeCloseTo(19, 6);
});

test('a hub of 1e-3 kg m² is found again, whatever the rig says of one', () => {
  const period = { value: smallPeriodFrom((moment + 1e-3) / staticMoment, 9.80665), u: 0, dof: null };
  for (const parts of [{}, { hub_inertia_g_mm2: 5_000_000 }]) {
    const hub = explainingHub({ ...rig, ...parts }, period, { value: 9.80665, u: 4e-4 })!;
    expect(hub.value).toBeCloseTo(1e-3, 10);
    expect(hub.u).toBeCloseTo(((moment + 1e-3) * 4e-4) / 9.80665, 10);
  }
});

test('the lengths bring their part, and a pendulum slower than its parts has a hub below nothing', () => {
  const period = { value: Number(physical.rod_plus_bob.T) * 0.999, u: 0, dof: null };
  const hub = explainingHub({ ...rig, length_u_um: 1_000 }, period, standard)!;
  expect(hub.value).toBeCloseTo(-2e-3 * moment, 6);
  expect(hub.u).toBeGreaterThan(1e-4);
});

test('a string has no hub, and without its masses a bar says nothing of one', () => {
  const period = { value: 2, u: 0.001, dof: 19 };
  expect(explainingHub(stringRig(), period, standard)).toBeUndefined();
  expect(explainingHub({ ...rig, bar_mass_mg: undefined }, period, standard)).toBeUndefined();
});
