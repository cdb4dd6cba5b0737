import type { Jitters, Taken } from './jitters';
import type { LeftOver } from './leftOver';
import type { MotionData } from './motionData';
import type { Slopes } from './motionSlopes';
import type { Places } from './motionUnknowns';
import { splitLosses } from './splitLosses';
import type { MotionStart } from './startMotion';

/** What is known of the unknowns. */
export interface Linear {
  mean: number[];
  /** Of the unknowns in the end, and the part of it that the data still move. */
  covariance: number[][];
  within: number[][];
  /** How likely each of LOSS_SETS is. */
  chances: number[];
  /** Weights of single blocks, below 1 for those far off. */
  blockWeights: number[];
  taken: Taken;
}

/** Blocks further off than this many standard deviations count less. */
const FAR_BLOCK = 3;

/** The normal distribution of the unknowns when all is taken as straight about the values. */
export function linearise(at: {
  data: MotionData;
  places: Places;
  values: number[];
  columns: Slopes;
  left: LeftOver;
  begin: MotionStart;
  jitters: Jitters;
}): Linear | undefined {
  const { data, places, values, columns, left, begin } = at;
  const { jitter, blockJitter, readingFactor } = at.jitters;
  const n = places.count;
  const weights = {
    times: left.times.map(() => 1 / jitter ** 2),
    blocked: left.blocked.map((r) => Math.min(1, (FAR_BLOCK * blockJitter) / Math.abs(r)) / blockJitter ** 2),
    readings: Float64Array.from(data.readings, ({ u }) => 1 / (u * readingFactor) ** 2),
  };
  const readingsLeft = left.readings.map((r, i) => r * data.readings[i]!.u);
  const information = Array.from({ length: n }, () => new Array<number>(n).fill(0));
  const gradient = new Array<number>(n).fill(0);
  const byMarks = Array.from({ length: n }, () => new Array<number>(n).fill(0));
  const byReadings = Array.from({ length: n }, () => new Array<number>(n).fill(0));
  for (let i = 0; i < n; i += 1) {
    gradient[i] =
      weighted(columns.times[i]!, left.times, weights.times) +
      weighted(columns.blocked[i]!, left.blocked, weights.blocked) +
      weighted(columns.amplitudes[i]!, readingsLeft, weights.readings);
    for (let j = 0; j <= i; j += 1) {
      const marks = weighted(columns.times[i]!, columns.times[j]!, weights.times);
      const readings = weighted(columns.amplitudes[i]!, columns.amplitudes[j]!, weights.readings);
      const blocks = weighted(columns.blocked[i]!, columns.blocked[j]!, weights.blocked);
      byMarks[i]![j] = byMarks[j]![i] = marks;
      byReadings[i]![j] = byReadings[j]![i] = readings;
      information[i]![j] = information[j]![i] = marks + readings + blocks;
    }
  }
  const know = (place: number, value: number, u: number) => {
    if (place < 0) return;
    information[place]![place]! += 1 / u ** 2;
    gradient[place]! += (value - values[place]!) / u ** 2;
  };
  know(places.flagError, 0, data.gate?.flagU ?? 1);
  const found = splitLosses(information, gradient, values, places, begin);
  if (!found) return undefined;
  return {
    ...found,
    blockWeights: [...weights.blocked],
    taken: { marks: traceOfProduct(found.within, byMarks), readings: traceOfProduct(found.within, byReadings) },
  };
}

function weighted(a: Float64Array, b: Float64Array, weights: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < weights.length; i += 1) sum += a[i]! * b[i]! * weights[i]!;
  return sum;
}

function traceOfProduct(a: number[][], b: number[][]): number {
  let sum = 0;
  for (let i = 0; i < a.length; i += 1) for (let j = 0; j < a.length; j += 1) sum += a[i]![j]! * b[j]![i]!;
  return sum;
}
