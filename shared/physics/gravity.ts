/** Standard acceleration of free fall, m/s². @see 3rd CGPM (1901) */
export const STANDARD_GRAVITY = 9.80665;

/**
 * Half the spread of g over places where people teach, as a standard uncertainty, m/s²: sea level
 * runs from 9.780 at the equator to 9.832 at the poles, rectangular. @see WGS 84 normal gravity
 */
export const GRAVITY_U_ANYWHERE = 0.026 / Math.sqrt(3);

/**
 * g from the small-amplitude period of a pendulum of known reduced length.
 *
 * @param smallPeriod    T0, s, > 0
 * @param reducedLength  length of the simple pendulum with the same period, m, > 0
 * @returns              m/s²
 * @example gravityFrom(2.0064, 1) // 9.8067
 */
export function gravityFrom(smallPeriod: number, reducedLength: number): number {
  return (4 * Math.PI ** 2 * reducedLength) / smallPeriod ** 2;
}

/**
 * Small-amplitude period of a pendulum of known reduced length.
 *
 * @param reducedLength  m, > 0
 * @param gravity        m/s², > 0
 * @returns              T0, s
 * @example smallPeriodFrom(1, 9.80665) // 2.00641
 */
export function smallPeriodFrom(reducedLength: number, gravity: number): number {
  return 2 * Math.PI * Math.sqrt(reducedLength / gravity);
}
