import type { Measured } from '../schemas/common';
import type { Rig } from '../schemas/rig';
import { GRAVITY_U_ANYWHERE, smallPeriodFrom, STANDARD_GRAVITY } from './gravity';
import { pivotToCentre } from './rigLength';
import { hypot } from '../statistics/hypot';

const M_PER_UM = 1e-6;

/**
 * Length of the simple pendulum that swings with the same small-amplitude period: (kc² + d²)/d, with
 * kc the radius of gyration about the centre of mass and d its distance from the pivot.
 *
 * - string and bob: kc² = (2/5) r² of a solid sphere when the diameter is known, else 0
 * - bar: kc² = length²/12, d from its middle; disc: D²/8; ring: D²/4, both on the rim unless an offset is given
 * - bar with bob, other: their masses are not known here
 *
 * @param rig  as entered
 * @returns    m, with its standard uncertainty; undefined when the rig does not say enough
 * @example reducedLength({ kind: 'bar', bar_length_um: 1_000_000, pivot_offset_um: 500_000, … }) // 0.6667 m
 */
export function reducedLength(rig: Rig): Measured | undefined {
  const u = rig.length_u_um * M_PER_UM;
  if (rig.kind === 'string_bob') return stringAndBob(rig);
  if (rig.bar_length_um === null) return undefined;
  const size = rig.bar_length_um * M_PER_UM;
  const rim = rig.kind === 'bar' ? undefined : size / 2;
  const offset = rig.pivot_offset_um === null ? rim : rig.pivot_offset_um * M_PER_UM;
  const shape = { bar: 1 / 12, disc: 1 / 8, ring: 1 / 4, string_bob: 0, bar_bob: 0, other: 0 }[rig.kind];
  if (shape === 0 || offset === undefined || offset === 0) return undefined;
  const value = (shape * size ** 2) / offset + offset;
  const perSize = (2 * shape * size) / offset;
  const perOffset = 1 - (shape * size ** 2) / offset ** 2;
  // On the rim the offset is half the diameter and not a reading of its own.
  const onRim = rig.pivot_offset_um === null;
  return { value, u: onRim ? u * Math.abs(perSize + perOffset / 2) : u * hypot(perSize, perOffset) };
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
  if (length === undefined || !(length.value > 0)) return undefined;
  const value = smallPeriodFrom(length.value, STANDARD_GRAVITY);
  return { value, u: (value / 2) * hypot(length.u / length.value, GRAVITY_U_ANYWHERE / STANDARD_GRAVITY) };
}

function stringAndBob(rig: Rig): Measured | undefined {
  const length = pivotToCentre(rig);
  if (length === undefined || !(length.value > 0)) return undefined;
  const radius = ((rig.bob_diameter_um ?? 0) * M_PER_UM) / 2;
  const finiteBob = (0.4 * radius ** 2) / length.value;
  return { value: length.value + finiteBob, u: length.u };
}
