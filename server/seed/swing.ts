import { smallPeriodFrom } from '@shared/physics/gravity';
import { periodRatio } from '@shared/physics/periodRatio';

export interface Pendulum {
  /** Length of the simple pendulum that keeps the same time, m. */
  reducedLength: number;
  /** Rest to turning point at the first pass, degrees. */
  amplitude_deg: number;
  /** What is left of the amplitude after one swing. */
  keptPerSwing: number;
}

/** g where the demo's benches stand, m/s². */
const GRAVITY = 9.812;
const RAD = Math.PI / 180;

/** Times of 2 × swings + 1 passes through the lowest point, s from the first. Each half swing has the amplitude of its middle. */
export function passTimes({ reducedLength, amplitude_deg, keptPerSwing }: Pendulum, swings: number): number[] {
  const smallPeriod = smallPeriodFrom(reducedLength, GRAVITY);
  const times = [0];
  for (let half = 0; half < 2 * swings; half += 1) {
    const amplitude = amplitude_deg * RAD * keptPerSwing ** ((half + 0.5) / 2);
    times.push(times.at(-1)! + (smallPeriod / 2) * periodRatio(amplitude));
  }
  return times;
}

/** Amplitude after so many swings, degrees. */
export const amplitudeAfter = ({ amplitude_deg, keptPerSwing }: Pendulum, swings: number) =>
  amplitude_deg * keptPerSwing ** swings;

/** Greatest speed of a point of the pendulum at a pass, m/s. */
export function speedAtPass({ reducedLength }: Pendulum, amplitude_deg: number, distance: number): number {
  const angularSpeed = 2 * Math.sqrt(GRAVITY / reducedLength) * Math.sin((amplitude_deg * RAD) / 2);
  return angularSpeed * distance;
}
