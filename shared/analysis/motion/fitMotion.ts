import { jittersOf, markJitter, type JitterLimits } from './jitters';
import { leftOver, unlikeliness } from './leftOver';
import { linearise, type Linear } from './linearise';
import type { MotionData } from './motionData';
import type { MotionFit } from './motionFit';
import { motionSlopes, type Slopes } from './motionSlopes';
import { losesMuch, lossRates, placesOf, shapeOf } from './motionUnknowns';
import { alongSlopes, LARGEST_AMPLITUDE, moveWithin, type Moved } from './moveWithin';
import {
  isIntegrable,
  predictAveraged,
  predictIntegrated,
  type MotionEvent,
  type Prediction,
  type Questions,
} from './predictMotion';
import { setOut } from './setOut';
import type { MotionStart } from './startMotion';

export interface FitOptions extends JitterLimits {
  event: MotionEvent;
  path: MotionFit['path'];
  /** Where to set out from, better than the start. */
  near?: MotionFit;
}

const MOST_STEPS = 25;
const MOST_INTEGRATED_STEPS = 15;
/** A step this small, in standard uncertainties, is the last. */
const SETTLED = 1e-3;
/** A step smaller than this is made along the slopes, which are right to some per cent of it. */
const ALONG_SLOPES = 0.03;
/** Data that hold the amplitude at its limit for so many steps are those of no pendulum, and no fit of them settles. */
const MOST_AT_LIMIT = 3;

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

  const first = options.near?.values ?? setOut(places, begin, data, averaged);
  let prediction = first && predict(first);
  if (!first || !prediction) return undefined;
  let values = first;
  let left = leftOver(values, places, prediction, data);
  let taken = { marks: Math.min(places.count, data.times.length), readings: 0 };
  let jitters = jittersOf(left, taken, data, options);
  let state: Linear | undefined;
  let columns: Slopes | undefined;
  let converged = false;
  let atLimit = 0;
  for (let step = 0; step < (isIntegrated ? MOST_INTEGRATED_STEPS : MOST_STEPS) && !converged; step += 1) {
    // Slopes need not be exact for a step to lead on; integrated ones cost five integrations, and are kept.
    const slopesBy = isIntegrated && losesMuch(values, places, rates) ? predict : averaged;
    if (slopesBy === averaged || step < 2) {
      const base: Prediction | undefined = slopesBy === predict ? prediction : averaged(values);
      columns = (base && motionSlopes(values, places, base, slopesBy, data)) ?? columns;
    }
    if (!columns) return undefined;
    jitters = jittersOf(left, taken, data, options);
    state = linearise({ data, places, values, columns, left, begin, jitters });
    if (!state) return undefined;
    const { mean, covariance } = state;
    const size = Math.max(...mean.map((v, i) => Math.abs(v - values[i]!) / Math.sqrt(covariance[i]![i]!)));
    const moved: Moved | undefined =
      isIntegrated && size < ALONG_SLOPES && mean[places.amplitude]! < LARGEST_AMPLITUDE
        ? { values: mean, prediction: alongSlopes(prediction, columns, values, mean, places) }
        : moveWithin(values, mean, places, predict);
    if (!moved) return undefined;
    ({ values, prediction } = moved);
    atLimit = values[places.amplitude]! < LARGEST_AMPLITUDE ? 0 : atLimit + 1;
    left = leftOver(values, places, prediction, data);
    taken = state.taken;
    converged = size < SETTLED && Math.abs(markJitter(left, taken, options) / jitters.jitter - 1) < 1e-3;
    if (atLimit === MOST_AT_LIMIT) break;
  }
  if (!state || !columns) return undefined;
  const { covariance, within, chances, blockWeights } = state;
  if (!values.every(Number.isFinite) || !covariance.every((row) => row.every(Number.isFinite))) return undefined;
  return {
    ...{ event: options.event, path: isIntegrated ? 'integrated' : 'averaged', converged },
    ...{ places, rates, from, values, prediction, slopes: columns },
    ...{ covariance, within, chances, blockWeights },
    ...jitters,
    residuals: [...left.times],
    unlikeliness: unlikeliness(left, data.times.length, options.leastJitter),
    free: data.times.length - taken.marks,
  };
}
