import { sin } from './elementary';

/** Defining and derived constants of the ellipsoid. @see NGA.STND.0036, World Geodetic System 1984 */
const WGS84 = {
  /** Semi-major axis, m. */
  a: 6_378_137,
  /** Flattening. */
  f: 1 / 298.257223563,
  /** First eccentricity squared. */
  e2: 0.00669437999014132,
  /** Normal gravity at the equator, m/s². */
  equator: 9.78032533590389,
  /** Somigliana's constant, derived from the defining ones; the published …5241 differs in its 11th digit. */
  k: 0.00193185265245827,
  /** ω²a²b/GM. */
  m: 0.00344978650684084,
};

/**
 * How well a computed value stands for the real one, m/s², as a standard uncertainty: absolute stations
 * lie up to 50 mGal off (Sèvres −19, Teddington −11, Potsdam +6, Ottawa −25, Washington +37, Gaithersburg
 * +50, measured minus computed; station heights from memory).
 */
export const NORMAL_GRAVITY_U = 4e-4;

/**
 * Normal gravity on and above the WGS 84 ellipsoid: Somigliana's closed formula, and its series in height
 * to the second order.
 *
 * @param latitude  geodetic, rad, in [−π/2, π/2]
 * @param height    above sea level (the ellipsoid is within 100 m of it: 0.3 mm/s²), m, in [−500, 10 000]
 * @returns         m/s²
 * @throws {RangeError} naming the argument out of range
 * @example normalGravity(radians(45), 0) // 9.806197769
 * @see NGA.STND.0036, eq. 4-1 and 4-3
 */
export function normalGravity(latitude: number, height = 0): number {
  if (!(Math.abs(latitude) <= Math.PI / 2)) {
    throw new RangeError(`normalGravity: latitude is ${latitude} rad, it must be from −π/2 to π/2`);
  }
  if (!(height >= -500 && height <= 10_000)) {
    throw new RangeError(`normalGravity: height is ${height} m, it must be from −500 to 10 000`);
  }
  const { a, f, e2, equator, k, m } = WGS84;
  const s2 = sin(latitude) ** 2;
  const onEllipsoid = (equator * (1 + k * s2)) / Math.sqrt(1 - e2 * s2);
  return onEllipsoid * (1 - (2 / a) * (1 + f + m - 2 * f * s2) * height + 3 * (height / a) ** 2);
}
