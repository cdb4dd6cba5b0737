import type { AmplitudePoint } from '../physics/amplitudeCurve';
import type { ViewAmplitude } from '../timing/runView';
import { radians } from '../units/angle';
import { asin, cos } from '../physics/elementary';

const LARGEST = radians(179.5);

/**
 * Amplitude readings as angles. A sideways distance is that of the bob's centre from the plumb line.
 * Readings that no pendulum can have (further sideways than it is long) stay out.
 */
export function readAmplitudes(readings: ViewAmplitude[]): AmplitudePoint[] {
  return readings.flatMap(({ swing, as_read, u }): AmplitudePoint[] => {
    if (as_read.form === 'angle') {
      return [{ swing, amplitude: Math.min(radians(as_read.mdeg / 1000), LARGEST), u: radians(u / 1000) }];
    }
    const sine = as_read.sideways_um / as_read.length_um;
    if (!(sine < 1)) return [];
    const amplitude = asin(sine);
    return [{ swing, amplitude, u: u / as_read.length_um / cos(amplitude) }];
  });
}
