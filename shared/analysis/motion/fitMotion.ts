import { quantile } from '../../statistics/quantile';
import type { MotionData } from './motionData';
import { slopes } from '../../physics/motion/averagedMotion';
import { dampingOf, lossRates, placesOf, shapeOf, type Places } from './motionUnknowns';
import {
  isIntegrable,
  predictAveraged,
  predictIntegrated,
  type MotionEvent,
  type Prediction,
  type Questions,
} from './predictMotion';
import { splitLosses } from './splitLosses';
import type { MotionStart } from './startMotion';
import { log } from '../../physics/elementary';

/** A motion through the data, and what its uncertainty needs. */
export interface MotionFit {
  event: MotionEvent;
  places: Places;
  rates: [number, number, number];
  /** The swing the motion was released at. */
  from: number;
  values: number[];
  /** Of the unknowns in the end, and the part of it that the data still move. */
  covariance: number[][];
  within: number[][];
  /** How likely each of LOSS_SETS is. */
  chances: number[];
  prediction: Prediction;
  /** ∂ of each predicted quantity after each unknown, one column an unknown. */
  slopes: Slopes;
  /** Observed minus calculated, s. */
  residuals: number[];
  /** Standard deviations used as weights: of a mark, s, of a block, s, and what reading uncertainties were multiplied with. */
  jitter: number;
  blockJitter: number;
  readingFactor: number;
  /** Weights of single blocks, below 1 for those far off. */
  blockWeights: number[];
  /** −2 log of how likely the data are, but for a constant. */
  unlikeliness: number;
  /** Marks less what the unknowns have taken from them. */
  free: number;
  path: 'averaged' | 'integrated';
  converged: boolean;
  steps: number;
}

export interface Slopes {
  times: Float64Array[];
  blocked: Float64Array[];
  amplitudes: Float64Array[];
}

export interface FitOptions {
  event: MotionEvent;
  path: 'averaged' | 'integrated';
  /** What jitter to reckon with when the marks cannot tell, s, and the least possible. */
  usualJitter: number;
  leastJitter: number;
  /** Where to set out from, better than the start. */
  near?: MotionFit;
}

const TWO_PI = 2 * Math.PI;
const MOST_STEPS = 25;
const MOST_INTEGRATED_STEPS = 15;
/** A step this small, in standard uncertainties, is the last. */
const SETTLED = 1e-3;
const LARGEST = (179.5 / 180) * Math.PI;
/** Where so large a share of the amplitude goes in the first swing, the averaged law is no good guide. */
const LARGE_LOSS = 0.04;
/** With fewer marks left over, they do not tell their jitter. */
const FEWEST_FREE = 1.5;
/** Blocks further off than this many standard deviations count less. */
const FAR_BLOCK = 3;

/**
 * Least squares on marks, amplitude readings and block times for start, T0, amplitude and the three
 * terms of damping, by Gauss–Newton steps. The weight of the marks follows from their own scatter. Losses
 * cannot be negative: that is knowledge like any reading, put in as `keepPositive` says, and the values
 * are means of what is then left possible rather than a corner of it. Before the data speak, each term
 * may be anything about a third of the loss, with a spread as large as the loss itself.
 *
 * @param amplitudesAt  swings at which the amplitude is wanted beyond the readings
 * @returns             undefined when the data fix no motion
 */
export function fitMotion(
  data: MotionData,
  begin: MotionStart,
  from: number,
  amplitudesAt: number[],
  options: FitOptions,
): MotionFit | undefined {
  const places = placesOf(data);
  const rates = lossRates(begin.reference);
  const asked: Questions = {
    event: options.event,
    swings: data.swings,
    amplitudesAt: [...data.readings.map((reading) => reading.swing), ...amplitudesAt],
    from,
    hasFlag: data.gate?.blocked !== undefined,
  };
  const isIntegrated = options.path === 'integrated' && isIntegrable(asked);
  const predictWith = (predict: typeof predictAveraged) => (values: number[]) =>
    predict(shapeOf(values, places, rates, data.gate), asked);
  const averaged = predictWith(predictAveraged);
  const predict = isIntegrated ? predictWith(predictIntegrated) : averaged;

  const setOut = (mixture: readonly number[]) => firstValues(places, begin, mixture);
  const first = options.near ? [...options.near.values] : bestOf(MIXTURES.map(setOut), averaged, data);
  let values = first ?? [];
  let prediction = first && predict(first);
  if (!prediction) return undefined;
  let jitter = options.near?.jitter ?? Math.max(begin.jitter, options.leastJitter);
  let blockJitter = options.near?.blockJitter ?? 0;
  let readingFactor = options.near?.readingFactor ?? 1;
  let taken = { marks: Math.min(places.count, data.times.length), readings: 0 };
  let converged = false;
  let state: Linear | undefined;
  let columns: Slopes | undefined;
  let steps = 0;
  for (; steps < (isIntegrated ? MOST_INTEGRATED_STEPS : MOST_STEPS) && !converged; steps += 1) {
    // Slopes need not be exact for a step to lead on; integrated ones cost five integrations, and are kept.
    const slopesBy = isIntegrated && losesMuch(values, places, rates) ? predict : averaged;
    if (slopesBy === averaged || steps < 2) {
      const base = slopesBy === predict ? prediction : averaged(values);
      columns = (base && slopesOf(values, places, base, slopesBy, data)) ?? columns;
    }
    if (!columns) return undefined;
    const left = leftOver(values, places, prediction, data);
    const free = data.times.length - taken.marks;
    jitter = jitterOf(left.times, free, options);
    blockJitter = blockJitterOf(left.blocked, options.leastJitter, data);
    readingFactor = readingFactorOf(left.readings, taken.readings);
    state = linearise({ data, places, values, columns, left, begin, jitter, blockJitter, readingFactor });
    if (!state) return undefined;
    taken = state.taken;
    const moved = moveWithin(values, state.mean, places, predict);
    if (!moved) return undefined;
    const size = Math.max(...state.mean.map((v, i) => Math.abs(v - values[i]!) / Math.sqrt(state!.covariance[i]![i]!)));
    values = moved.values;
    prediction = moved.prediction;
    const jitterThen = jitterOf(
      leftOver(values, places, prediction, data).times,
      data.times.length - taken.marks,
      options,
    );
    converged = size < SETTLED && Math.abs(jitterThen / jitter - 1) < 1e-3;
  }
  if (!state || !columns) return undefined;
  const left = leftOver(values, places, prediction, data);
  const free = data.times.length - taken.marks;
  const fit: MotionFit = {
    event: options.event,
    places,
    rates,
    from,
    values,
    covariance: state.covariance,
    within: state.within,
    chances: state.chances,
    prediction,
    slopes: columns,
    residuals: [...left.times],
    jitter,
    blockJitter,
    readingFactor,
    blockWeights: state.blockWeights,
    unlikeliness: unlikeliness(left, data.times.length, options.leastJitter),
    free,
    path: isIntegrated ? 'integrated' : 'averaged',
    converged,
    steps,
  };
  return values.every(Number.isFinite) && state.covariance.every((row) => row.every(Number.isFinite)) ? fit : undefined;
}

/** Whether the averaged law is too rough to judge by. */
export function losesMuch(values: number[], places: Places, rates: readonly number[]): boolean {
  const amplitude = values[places.amplitude]!;
  return -slopes(amplitude, dampingOf(values, places, rates))[0] > LARGE_LOSS * amplitude;
}

/** Parts of the loss to set out with: viscous, quadratic, dry. */
const MIXTURES = [
  [1 / 3, 1 / 3, 1 / 3],
  [0, 1, 0],
  [1, 0, 0],
  [0, 0, 1],
] as const;

function firstValues(places: Places, begin: MotionStart, mixture: readonly number[]): number[] {
  const values = new Array<number>(places.count).fill(0);
  values[places.start] = begin.start;
  values[places.period] = begin.period;
  if (places.limp >= 0) values[places.limp] = begin.limp;
  values[places.amplitude] = begin.amplitude;
  places.losses.forEach((place, k) => (values[place] = begin.loss * mixture[k]!));
  if (places.gateAngle >= 0) values[places.gateAngle] = begin.gateAngle;
  return values;
}

/** The one whose amplitudes come nearest to the readings. */
function bestOf(
  starts: number[][],
  predict: (values: number[]) => Prediction | undefined,
  { readings }: MotionData,
): number[] | undefined {
  let best: number[] | undefined;
  let least = Infinity;
  for (const start of starts) {
    const found = predict(start);
    const off =
      found && readings.reduce((sum, { amplitude, u }, i) => sum + ((amplitude - found.amplitudes[i]!) / u) ** 2, 0);
    if (off === undefined || off >= least) continue;
    [best, least] = [start, off];
  }
  return best;
}

interface LeftOver {
  times: Float64Array;
  blocked: Float64Array;
  /** In standard uncertainties as read. */
  readings: Float64Array;
}

/** Observed minus calculated. */
function leftOver(values: number[], places: Places, prediction: Prediction, data: MotionData): LeftOver {
  const scale = values[places.period]! / TWO_PI;
  const limp = places.limp < 0 ? 0 : values[places.limp]!;
  return {
    times: Float64Array.from(
      data.times,
      (t, i) => t - values[places.start]! - scale * prediction.times[i]! - (data.isOdd?.[i] ? limp : 0),
    ),
    blocked: Float64Array.from(data.gate?.blocked ?? [], (t, i) => t - scale * prediction.blocked[i]!),
    readings: Float64Array.from(data.readings, ({ amplitude, u }, i) => (amplitude - prediction.amplitudes[i]!) / u),
  };
}

/** Slopes of marks and blocks in s, of amplitudes in rad. */
function slopesOf(
  values: number[],
  places: Places,
  base: Prediction,
  predict: (values: number[]) => Prediction | undefined,
  data: MotionData,
): Slopes | undefined {
  const scale = values[places.period]! / TWO_PI;
  const zeros = () => Array.from({ length: places.count }, () => new Float64Array(0));
  const found: Slopes = { times: zeros(), blocked: zeros(), amplitudes: zeros() };
  const set = (place: number, times: Float64Array, blocked: Float64Array, amplitudes: Float64Array) => {
    found.times[place] = times;
    found.blocked[place] = blocked;
    found.amplitudes[place] = amplitudes;
  };
  const none = {
    times: new Float64Array(base.times.length),
    blocked: new Float64Array(base.blocked.length),
    amplitudes: new Float64Array(base.amplitudes.length),
  };
  set(
    places.start,
    none.times.map(() => 1),
    none.blocked,
    none.amplitudes,
  );
  set(
    places.period,
    base.times.map((t) => t / TWO_PI),
    base.blocked.map((t) => t / TWO_PI),
    none.amplitudes,
  );
  if (places.limp >= 0)
    set(
      places.limp,
      none.times.map((_, i) => (data.isOdd![i] ? 1 : 0)),
      none.blocked,
      none.amplitudes,
    );
  if (places.gateAngle >= 0) {
    set(
      places.gateAngle,
      base.timesPerAngle.map((t) => t * scale),
      base.blockedPerAngle.map((t) => t * scale),
      none.amplitudes,
    );
  }
  if (places.flagError >= 0) {
    const share = 1 + values[places.flagError]!;
    set(
      places.flagError,
      none.times,
      base.blocked.map((t) => (t * scale) / share),
      none.amplitudes,
    );
  }
  const amplitude = values[places.amplitude]!;
  for (const place of [places.amplitude, ...places.losses]) {
    const by =
      place === places.amplitude ? -1e-4 * Math.min(amplitude, Math.PI - amplitude) : 1e-5 + 1e-3 * values[place]!;
    const moved = predict(values.map((v, i) => (i === place ? v + by : v)));
    if (!moved) return undefined;
    set(
      place,
      base.times.map((t, i) => ((moved.times[i]! - t) / by) * scale),
      base.blocked.map((t, i) => ((moved.blocked[i]! - t) / by) * scale),
      base.amplitudes.map((a, i) => (moved.amplitudes[i]! - a) / by),
    );
  }
  return found;
}

function jitterOf(left: Float64Array, free: number, { usualJitter, leastJitter }: FitOptions): number {
  if (free < FEWEST_FREE) return usualJitter;
  return Math.max(Math.sqrt(left.reduce((sum, r) => sum + r * r, 0) / free), leastJitter);
}

/** By the median, so that a block broken by chatter does no harm. */
function blockJitterOf(left: Float64Array, least: number, { gate }: MotionData): number {
  if (left.length === 0) return 1;
  const scatter = 1.4826 * quantile(Array.from(left, Math.abs), 0.5);
  const few = left.length < 8 ? 0.002 * quantile(gate!.blocked!, 0.5) : 0;
  return Math.max(scatter, 2 * least, few);
}

/** Readings that scatter more than they claim are given the uncertainty they show. */
function readingFactorOf(left: Float64Array, taken: number): number {
  const free = left.length - taken;
  if (left.length < 4 || free < 1) return 1;
  return Math.max(1, Math.sqrt(left.reduce((sum, r) => sum + r * r, 0) / free));
}

interface Linear {
  mean: number[];
  covariance: number[][];
  within: number[][];
  chances: number[];
  blockWeights: number[];
  taken: { marks: number; readings: number };
}

/** The normal distribution of the unknowns when all is taken as straight about the values. */
function linearise(at: {
  data: MotionData;
  places: Places;
  values: number[];
  columns: Slopes;
  left: LeftOver;
  begin: MotionStart;
  jitter: number;
  blockJitter: number;
  readingFactor: number;
}): Linear | undefined {
  const { data, places, values, columns, left, begin } = at;
  const n = places.count;
  const weights = {
    times: left.times.map(() => 1 / at.jitter ** 2),
    blocked: left.blocked.map((r) => Math.min(1, (FAR_BLOCK * at.blockJitter) / Math.abs(r)) / at.blockJitter ** 2),
    readings: Float64Array.from(data.readings, ({ u }) => 1 / (u * at.readingFactor) ** 2),
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

/** Steps towards the mean as far as the motion can be followed. */
function moveWithin(
  values: number[],
  mean: number[],
  places: Places,
  predict: (values: number[]) => Prediction | undefined,
) {
  const amplitude = values[places.amplitude]!;
  const largest = Math.min((amplitude + Math.PI) / 2, 2 * amplitude, LARGEST);
  let share = 1;
  for (let half = 0; half < 10; half += 1) {
    const tried = values.map((v, i) => v + share * (mean[i]! - v));
    tried[places.amplitude] = Math.min(Math.max(tried[places.amplitude]!, amplitude / 2), largest);
    tried[places.period] = Math.max(tried[places.period]!, values[places.period]! / 2);
    for (const place of places.losses) tried[place] = Math.min(Math.max(tried[place]!, 0), 2);
    const prediction = predict(tried);
    if (prediction) return { values: tried, prediction };
    share /= 2;
  }
  return undefined;
}

function unlikeliness(left: LeftOver, marks: number, least: number): number {
  const squares = left.times.reduce((sum, r) => sum + r * r, 0);
  return Math.max(marks - 3, 0) * log(squares + marks * least ** 2) + left.readings.reduce((sum, r) => sum + r * r, 0);
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
