/** Degrees of an angle in radians. @example degrees(Math.PI) // 180 */
export function degrees(angle: number): number {
  return (angle * 180) / Math.PI;
}

/** Radians of an angle in degrees. @example radians(180) // 3.14159… */
export function radians(angleInDegrees: number): number {
  return (angleInDegrees * Math.PI) / 180;
}
