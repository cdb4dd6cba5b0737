import { hubInertiaFrom } from '../physics/inertia';
import { missingReadings, rigInertia, rigQuantities, type RigQuantity } from '../physics/rigBody';
import { rigCorrections } from '../physics/rigCorrections';
import type { Result } from '../schemas/analysis';
import type { Measured } from '../schemas/common';
import type { Rig } from '../schemas/rig';
import { propagate } from '../statistics/propagate';
import { stateResult } from './stateResult';

/**
 * Inertia of hub or clamp that makes a rig swing with its measured T0 where g is known. What the rig itself
 * says of a hub is not used, so the two can be compared.
 *
 * @param smallPeriod  T0, s, with its degrees of freedom
 * @param gravity      of the place, m/s², with its standard uncertainty
 * @returns            kg m²; below 0 when the parts alone swing slower than T0 says. Undefined for a bob on a
 *                     string, which has no hub, and while a reading or a mass is missing
 * @see hubInertiaFrom
 */
export function explainingHub(
  rig: Rig,
  smallPeriod: Pick<Result, 'value' | 'u' | 'dof'>,
  gravity: Measured,
): Result | undefined {
  const parts = rigQuantities({ ...rig, hub_inertia_g_mm2: 0 });
  if (rig.kind === 'string_bob' || !parts.barMass || missingReadings(rig).length > 0) return undefined;
  // The support's share of T0 is none of the hub's.
  const factor = rigCorrections(rig, smallPeriod.value)?.factor ?? 1;
  const given = { ...parts, smallPeriod: { value: smallPeriod.value, u: smallPeriod.u }, gravity };
  const { value, shares } = propagate(
    given as Record<RigQuantity | 'smallPeriod' | 'gravity', Measured>,
    ({ smallPeriod: period, gravity: g, ...values }) => hubInertiaFrom(period, rigInertia(rig, values), g / factor),
  );
  const lines = Object.entries<number>(shares).map(([name, share]) => ({
    u: Math.abs(share),
    dof: name === 'smallPeriod' ? smallPeriod.dof : null,
  }));
  return stateResult(value, lines) ?? undefined;
}
