import { sin } from './elementary';

/**
 * Time an undamped pendulum takes from its lowest point to an angle, on its way out:
 * F(asin(sin(θ/2)/k), k)/ω with k = sin(A/2).
 *
 * @param angle        rad, in [−amplitude, amplitude]; negative angles give negative times
 * @param amplitude    rad, in (0, π)
 * @param smallPeriod  T0, s, > 0
 * @returns            s; a quarter of the period at the amplitude itself
 * @throws {RangeError} naming the argument out of range
 * @example timeFromBottom(radians(10), radians(20), 2) // 0.1673
 * @see Carlson, Numer. Math. 33, 1 (1979): F(φ,k) = sin φ R_F(cos² φ, 1 − k² sin² φ, 1)
 */
export function timeFromBottom(angle: number, amplitude: number, smallPeriod: number): number {
  if (!(amplitude > 0 && amplitude < Math.PI)) {
    throw new RangeError(`timeFromBottom: amplitude is ${amplitude} rad, it must be above 0 and below π`);
  }
  if (!(Math.abs(angle) <= amplitude)) {
    throw new RangeError(`timeFromBottom: angle is ${angle} rad, it must lie within the amplitude ${amplitude}`);
  }
  const k = sin(amplitude / 2);
  const half = sin(angle / 2);
  const sine = half / k;
  // cos² φ without the cancellation near the turning point.
  const cosineSquared = (sin((amplitude - angle) / 2) * sin((amplitude + angle) / 2)) / k ** 2;
  return (sine * carlsonRf(Math.max(cosineSquared, 0), 1 - half ** 2, 1) * smallPeriod) / (2 * Math.PI);
}

/** Carlson's symmetric integral of the first kind, by duplication; the series at the end is right to 1e-16. */
function carlsonRf(x: number, y: number, z: number): number {
  for (;;) {
    const mean = (x + y + z) / 3;
    const [dx, dy, dz] = [1 - x / mean, 1 - y / mean, 1 - z / mean];
    if (Math.max(Math.abs(dx), Math.abs(dy), Math.abs(dz)) < 1e-3) {
      const e2 = dx * dy - dz * dz;
      const e3 = dx * dy * dz;
      return (1 - e2 / 10 + e3 / 14 + (e2 * e2) / 24 - (3 * e2 * e3) / 44) / Math.sqrt(mean);
    }
    const [sx, sy, sz] = [Math.sqrt(x), Math.sqrt(y), Math.sqrt(z)];
    const lambda = sx * sy + sy * sz + sz * sx;
    [x, y, z] = [(x + lambda) / 4, (y + lambda) / 4, (z + lambda) / 4];
  }
}
