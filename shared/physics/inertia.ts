import type { Part } from './bodies';
import { STANDARD_GRAVITY } from './gravity';
import { mustBeAboveZero, mustNotBeNegative } from './mustBe';

/** What of a body decides how it swings. */
export interface Inertia {
  /** kg */
  mass: number;
  /** About the pivot, kg m². */
  moment: number;
  /** Mass times distance of the centre of mass below the pivot, kg m; the pull back is this times g sin θ. */
  staticMoment: number;
}

/**
 * Parts put together rigidly, each moved to the pivot by the parallel-axis theorem.
 *
 * @param parts       one or more
 * @param hubInertia  of what turns with the pivot and is centred on it (clamp, bearing, encoder disc), kg m²
 * @throws {RangeError} without a part, or for a negative hub
 * @example inertiaOf([bodies.bar(0.12, 0.45, 0.9), bodies.sphere(0.5, 0.8, 0.03)]).moment // 0.35258
 * @see Huygens–Steiner theorem
 */
export function inertiaOf(parts: readonly Part[], hubInertia = 0): Inertia {
  mustNotBeNegative('inertiaOf', { hubInertia });
  if (parts.length === 0) throw new RangeError('inertiaOf: there is no part, one or more are needed');
  const sum = (of: (part: Part) => number) => parts.reduce((total, part) => total + of(part), 0);
  return {
    mass: sum((p) => p.mass),
    moment: hubInertia + sum((p) => p.mass * (p.gyrationSquared + p.distance ** 2)),
    staticMoment: sum((p) => p.mass * p.distance),
  };
}

/**
 * Length of the simple pendulum with the same period: moment over static moment.
 *
 * @returns  m; undefined when the centre of mass is not below the pivot, for then it does not swing
 */
export function equivalentLength({ moment, staticMoment }: Inertia): number | undefined {
  return staticMoment > 0 ? moment / staticMoment : undefined;
}

/**
 * Small-amplitude period of a physical pendulum: 2π √(I/(m d g)). The factor for the amplitude is that
 * of a simple one.
 *
 * @param gravity  m/s², > 0
 * @returns        s; undefined when the centre of mass is not below the pivot
 * @example physicalPeriod(inertiaOf([bodies.bar(0.1, 0.5, 1)])) // 1.638226
 */
export function physicalPeriod(body: Inertia, gravity = STANDARD_GRAVITY): number | undefined {
  mustBeAboveZero('physicalPeriod', { gravity });
  const length = equivalentLength(body);
  return length === undefined ? undefined : 2 * Math.PI * Math.sqrt(length / gravity);
}

/**
 * Inertia of the hub or clamp, from the small-amplitude period where g is known: m d g T0²/4π² less the
 * moment of the parts.
 *
 * @param smallPeriod  T0, s, > 0
 * @param body         the parts without the hub
 * @param gravity      m/s², > 0
 * @returns            kg m²; below 0 when the parts alone swing slower than T0 says, which a sheet should say
 */
export function hubInertiaFrom(smallPeriod: number, body: Inertia, gravity: number): number {
  mustBeAboveZero('hubInertiaFrom', { smallPeriod, gravity });
  return body.staticMoment * gravity * (smallPeriod / (2 * Math.PI)) ** 2 - body.moment;
}

/**
 * Radius of gyration about the body's own centre of mass, and how far below the pivot that is.
 *
 * @returns  m; a hub counts as massless, so that it widens the radius and moves nothing
 */
export function centreOf({ mass, moment, staticMoment }: Inertia): { radiusOfGyration: number; distance: number } {
  const distance = staticMoment / mass;
  return { distance, radiusOfGyration: Math.sqrt(Math.max(moment / mass - distance ** 2, 0)) };
}

/**
 * Where a body swings fastest: hung its radius of gyration from the centre of mass.
 *
 * @param radiusOfGyration  about the centre of mass, m, > 0
 * @returns                 distance of that pivot, m, and the least small-amplitude period, s
 * @example leastPeriod(1 / Math.sqrt(12)) // { distance: 0.288675, period: 1.524541 }
 */
export function leastPeriod(radiusOfGyration: number, gravity = STANDARD_GRAVITY) {
  mustBeAboveZero('leastPeriod', { radiusOfGyration, gravity });
  return { distance: radiusOfGyration, period: 2 * Math.PI * Math.sqrt((2 * radiusOfGyration) / gravity) };
}

/**
 * The other distance from the centre of mass with the same period: d d' = kc². A pivot at one, on either
 * side, has its centre of oscillation at the other, and d + d' is the equivalent length.
 *
 * @param distance  m, > 0
 * @see Huygens, Horologium Oscillatorium (1673), part 4
 */
export function conjugateDistance(radiusOfGyration: number, distance: number): number {
  mustBeAboveZero('conjugateDistance', { radiusOfGyration, distance });
  return radiusOfGyration ** 2 / distance;
}
