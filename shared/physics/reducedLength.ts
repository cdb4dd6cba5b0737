import type { Measured } from '../schemas/common';
import type { Rig } from '../schemas/rig';
import { hypot } from '../statistics/hypot';
import { propagate } from '../statistics/propagate';
import { GRAVITY_U_ANYWHERE, smallPeriodFrom, STANDARD_GRAVITY } from './gravity';
import { equivalentLength } from './inertia';
import { LENGTHS, MASSES, missingReadings, rigInertia, rigQuantities, type RigQuantity } from './rigBody';

export interface ReducedLength extends Measured {
  /** What readings of lengths, of masses and the hub bring to `u`, m. */
  by: { length: number; mass: number; hub: number };
}

/**
 * Length of the simple pendulum that swings with the same small-amplitude period: moment of inertia about the
 * pivot over static moment. Every kind of rig; the string's mass and the air are corrections of their own.
 *
 * A disc hangs from its rim and a ring from its inner edge unless an offset is given; a ring without an inner
 * diameter is thin. Readings are taken as independent.
 *
 * @param rig  as entered
 * @returns    m, with its standard uncertainty; undefined when the rig does not say enough (`missingReadings`)
 * @example reducedLength({ kind: 'bar', bar_length_um: 1_000_000, pivot_offset_um: 500_000, … }) // 0.6667 m
 */
export function reducedLength(rig: Rig): ReducedLength | undefined {
  if (missingReadings(rig).length > 0) return undefined;
  const quantities = rigQuantities(rig) as Record<RigQuantity, Measured>;
  const { value, shares } = propagate(quantities, (values) => equivalentLength(rigInertia(rig, values)) ?? NaN);
  if (!Number.isFinite(value)) return undefined;
  const share = (...names: readonly RigQuantity[]) => hypot(...names.map((name) => shares[name] ?? 0));
  const by = { length: share(...LENGTHS), mass: share(...MASSES), hub: share('hub') };
  return { value, u: hypot(by.length, by.mass, by.hub), by };
}

/**
 * Small-amplitude period the rig should have, anywhere people live: standard gravity, and the spread
 * of gravity over the world in the uncertainty.
 *
 * @param rig  as entered
 * @returns    s, with its standard uncertainty; undefined when the rig does not say enough
 * @example expectedPeriod(rigOfOneMetre) // { value: 2.0064, u: 0.0016 }
 */
export function expectedPeriod(rig: Rig): Measured | undefined {
  const length = reducedLength(rig);
  if (length === undefined) return undefined;
  const value = smallPeriodFrom(length.value, STANDARD_GRAVITY);
  return { value, u: (value / 2) * hypot(length.u / length.value, GRAVITY_U_ANYWHERE / STANDARD_GRAVITY) };
}
