import type { AmplitudeDecay, DecayReading } from '@shared/analysis/pictures/amplitudeDecay';
import type { AmplitudePoint } from '@shared/physics/amplitudeCurve';
import { degrees } from '@shared/units/angle';

/** An amplitude, degrees, with its standard uncertainty. */
export interface Angle {
  value: number;
  u: number;
}

/** A place on the decay picture one can stand on. */
export interface DecayRow {
  /** Place in the rows, for the walk. */
  mark: number;
  swing: number;
  curve: Angle | null;
  reading: (Angle & { from: DecayReading['from'] }) | null;
}

const MOST_ROWS = 40;

/** Rows of table and walk: the curve at even swings, and every reading where it was read. */
export function decayRows({ curve, readings }: AmplitudeDecay): DecayRow[] {
  const stride = Math.ceil(curve.length / MOST_ROWS);
  const kept = curve.filter((_, i) => i % stride === 0 || i === curve.length - 1);
  const swings = [...new Set([...kept, ...readings].map(({ swing }) => swing))].sort((a, b) => a - b);
  return swings.map((swing, mark) => {
    const reading = readings.find((one) => one.swing === swing);
    return {
      mark,
      swing,
      curve: curveAt(curve, swing),
      reading: reading ? { ...inDegrees(reading), from: reading.from } : null,
    };
  });
}

/** The curve between its rows, along a straight line; null outside. */
export function curveAt(curve: AmplitudePoint[], swing: number): Angle | null {
  const after = curve.findIndex((row) => row.swing >= swing);
  const [left, right] = [curve[Math.max(after - 1, 0)], curve[after]];
  if (!left || !right || left.swing > swing) return null;
  const share = right.swing === left.swing ? 0 : (swing - left.swing) / (right.swing - left.swing);
  const between = (a: number, b: number) => a + share * (b - a);
  return inDegrees({ amplitude: between(left.amplitude, right.amplitude), u: between(left.u, right.u) });
}

const inDegrees = ({ amplitude, u }: Pick<AmplitudePoint, 'amplitude' | 'u'>): Angle => ({
  value: degrees(amplitude),
  u: degrees(u),
});
