import { NORMAL_GRAVITY_U, normalGravity } from '../physics/normalGravity';
import type { Measured } from '../schemas/common';
import { hypot } from '../statistics/hypot';

/** A value with its expanded uncertainty, at about 95 %. */
export interface Stated {
  value: number;
  expanded_u: number;
}

/**
 * Difference of two independent results over the expanded uncertainty of that difference. Within ±1 they
 * agree.
 *
 * @returns  undefined when neither has an uncertainty
 * @example enScore({ value: 9.79, expanded_u: 0.03 }, { value: 9.81, expanded_u: 0.001 }) // −0.666
 * @see ISO 13528, ISO/IEC 17043 (from memory)
 */
export function enScore(one: Stated, other: Stated): number | undefined {
  const expanded = hypot(one.expanded_u, other.expanded_u);
  return expanded > 0 ? (one.value - other.value) / expanded : undefined;
}

export interface GravityComparison {
  /** Normal gravity of the place, m/s². */
  normal: Measured;
  /** Measured minus normal, m/s². */
  difference: number;
  en: number;
  agrees: boolean;
}

/**
 * Measured g beside normal gravity of the place.
 *
 * @param gravity   m/s²
 * @param latitude  rad
 * @param height    m
 * @throws {RangeError} for what is no place
 */
export function compareGravity(gravity: Stated, latitude: number, height: number): GravityComparison {
  const normal = { value: normalGravity(latitude, height), u: NORMAL_GRAVITY_U };
  const en = enScore(gravity, { value: normal.value, expanded_u: 2 * normal.u })!;
  return { normal, difference: gravity.value - normal.value, en, agrees: Math.abs(en) <= 1 };
}
