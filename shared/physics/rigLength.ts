import type { Measured } from '../schemas/common';
import type { LengthReading, Rig } from '../schemas/rig';
import { hypot } from '../statistics/hypot';

const M_PER_UM = 1e-6;

/**
 * Pivot to the centre of the bob, from the length readings as they were taken. A reading to the top
 * of the bob lacks its radius, one to the bottom holds it once too often; without a diameter, a top
 * and a bottom reading together give the centre. Readings that cannot be used stay out.
 *
 * @param rig  as entered; only string_bob and bar_bob hang a bob
 * @returns    m, with its standard uncertainty (reading uncertainty or the scatter of the readings,
 *             whichever is larger, and the diameter's share); undefined when the rig does not say enough
 * @example pivotToCentre({ …, length_readings: [{ to: 'top', um: 985_000 }], bob_diameter_um: 30_000, … }) // 1.000 m
 */
export function pivotToCentre(rig: Rig): Measured | undefined {
  if (rig.kind !== 'string_bob' && rig.kind !== 'bar_bob') return undefined;
  const radius = bobRadius(rig);
  const usable = rig.length_readings.filter((reading) => reading.to === 'centre' || radius !== undefined);
  if (usable.length === 0) return undefined;
  const centres = usable.map((reading) => reading.um * M_PER_UM + side(reading) * (radius ?? 0));
  const mean = average(centres);
  const u = (rig.length_u_um * M_PER_UM) / Math.sqrt(centres.length);
  // Radius from a diameter read with the same rule: u/2. It cancels where top and bottom were both read.
  const uRadius = ((rig.length_u_um * M_PER_UM) / 2) * average(usable.map(side));
  return { value: mean, u: hypot(Math.max(u, scatterOfMean(centres)), uRadius) };
}

/** m; from the diameter, or from readings to the top and to the bottom. */
function bobRadius(rig: Rig): number | undefined {
  if (rig.bob_diameter_um !== null) return (rig.bob_diameter_um * M_PER_UM) / 2;
  const to = (end: LengthReading['to']) => rig.length_readings.filter((r) => r.to === end).map((r) => r.um * M_PER_UM);
  const [tops, bottoms] = [to('top'), to('bottom')];
  if (tops.length === 0 || bottoms.length === 0) return undefined;
  return (average(bottoms) - average(tops)) / 2;
}

function side(reading: LengthReading): number {
  return { centre: 0, top: 1, bottom: -1 }[reading.to];
}

function average(numbers: number[]): number {
  return numbers.reduce((sum, x) => sum + x, 0) / numbers.length;
}

function scatterOfMean(numbers: number[]): number {
  if (numbers.length < 2) return 0;
  const mean = average(numbers);
  const squares = numbers.reduce((sum, x) => sum + (x - mean) ** 2, 0);
  return Math.sqrt(squares / (numbers.length - 1) / numbers.length);
}
