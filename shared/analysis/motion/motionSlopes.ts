import type { MotionData } from './motionData';
import type { Places } from './motionUnknowns';
import type { Prediction } from './predictMotion';

/** ∂ of each predicted quantity after each unknown, one column an unknown: marks and blocks in s, amplitudes in rad. */
export interface Slopes {
  times: Float64Array[];
  blocked: Float64Array[];
  amplitudes: Float64Array[];
}

/** @returns undefined when a motion beside these values cannot be followed */
export function motionSlopes(
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

const TWO_PI = 2 * Math.PI;
