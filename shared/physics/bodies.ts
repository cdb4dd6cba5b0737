import { mustBeAboveZero, mustNotBeNegative } from './mustBe';

/** A rigid part of a pendulum. */
export interface Part {
  /** kg */
  mass: number;
  /** From the pivot down to the part's centre of mass, m; negative above the pivot. */
  distance: number;
  /** Square of the radius of gyration about the part's own centre of mass, m². */
  gyrationSquared: number;
}

/**
 * Moments of inertia of the shapes pendulums are made of, each as a part to be put together.
 * Masses in kg, lengths in m, all above 0; `distance` as in `Part`. The axis is that of the swing: level,
 * through the pivot.
 *
 * @throws {RangeError} naming the argument out of range
 * @see the usual table of moments of inertia, e.g. CRC Handbook of Chemistry and Physics, "Moment of inertia
 * for various bodies" (from memory); each is an elementary integral
 */
export const bodies = {
  /** Anything so small that only where it hangs counts. */
  point: (mass: number, distance: number): Part => part('point', mass, distance, 0),

  /** Solid ball: (2/5) r². */
  sphere(mass: number, distance: number, radius: number): Part {
    mustNotBeNegative('bodies.sphere', { radius });
    return part('sphere', mass, distance, 0.4 * radius ** 2);
  },

  /** Hollow ball with a thin wall: (2/3) r². */
  hollowSphere(mass: number, distance: number, radius: number): Part {
    mustNotBeNegative('bodies.hollowSphere', { radius });
    return part('hollowSphere', mass, distance, (2 / 3) * radius ** 2);
  },

  /** Straight even bar: (length² + width²)/12, the width measured in the plane of the swing. */
  bar(mass: number, distance: number, length: number, width = 0): Part {
    mustBeAboveZero('bodies.bar', { length });
    mustNotBeNegative('bodies.bar', { width });
    return part('bar', mass, distance, (length ** 2 + width ** 2) / 12);
  },

  /** Even string from the pivot down. */
  string: (mass: number, length: number): Part => bodies.bar(mass, length / 2, length),

  /** Flat disc swinging in its own plane, or a cylinder about an axis along it: r²/2. */
  disc(mass: number, distance: number, radius: number): Part {
    mustBeAboveZero('bodies.disc', { radius });
    return part('disc', mass, distance, radius ** 2 / 2);
  },

  /** Ring swinging in its own plane: (inner² + outer²)/2, for a thin one r². */
  ring(mass: number, distance: number, outerRadius: number, innerRadius = outerRadius): Part {
    mustBeAboveZero('bodies.ring', { outerRadius });
    if (!(innerRadius >= 0 && innerRadius <= outerRadius)) {
      throw new RangeError(
        `bodies.ring: innerRadius is ${innerRadius} m, it must be from 0 to the outer ${outerRadius}`,
      );
    }
    return part('ring', mass, distance, (innerRadius ** 2 + outerRadius ** 2) / 2);
  },

  /** Any body whose radius of gyration about its own centre of mass is known, m. */
  custom(mass: number, distance: number, radiusOfGyration: number): Part {
    mustNotBeNegative('bodies.custom', { radiusOfGyration });
    return part('custom', mass, distance, radiusOfGyration ** 2);
  },
};

function part(shape: string, mass: number, distance: number, gyrationSquared: number): Part {
  mustBeAboveZero(`bodies.${shape}`, { mass });
  if (!Number.isFinite(distance)) throw new RangeError(`bodies.${shape}: distance is ${distance}, it must be finite`);
  return { mass, distance, gyrationSquared };
}
