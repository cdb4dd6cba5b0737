import { cholesky } from '../statistics/invert';
import { leastSquares } from '../statistics/leastSquares';
import { amplitudeAlong, type AmplitudeCurve, type AmplitudePoint } from './amplitudeCurve';
import { exp } from './elementary';

/** A one-standard-uncertainty change of the curve, both ways, independent of the others. */
export interface CurveDoubt {
  term: 'amplitude' | 'decay';
  curves: AmplitudeCurve[];
  /** What half the difference between the curves (or the difference to the best one) is multiplied with. */
  weight: number;
}

export interface AmplitudeFit {
  curve: AmplitudeCurve;
  /** False when all readings are at one swing: the amplitude is then taken as constant. */
  decayKnown: boolean;
  doubts: CurveDoubt[];
}

/** The law of decay before the readings speak: rectangular from −1 (drag) to 1 (dry). */
const LAW_U = 1 / Math.sqrt(3);
/**
 * Fastest decay to reckon with when none was read: share of the amplitude lost a swing, and more of it at
 * large amplitudes, where drag grows with the speed. Common practice, no source.
 */
const MOST_LOST = 0.02;
const MOST_LOST_PER_RAD = 0.05;
/** rad. A reading cannot be better than this, whatever was entered. */
const LEAST_U = 1e-6;

/**
 * Curve of the amplitude through the readings, and how far it may be off.
 *
 * Two readings give an exponential between them, with the law of decay itself in doubt; three or more
 * also bend the law. One reading gives a constant amplitude, and a doubt from there to the fastest
 * decay to reckon with. Readings that would make the amplitude grow give a constant one: a free
 * pendulum only loses.
 *
 * @param readings  in any order; amplitudes in (0, 179.5°)
 * @returns         undefined without a reading
 */
export function fitAmplitudes(readings: AmplitudePoint[]): AmplitudeFit | undefined {
  const points = readings
    .map((point) => ({ ...point, u: Math.max(point.u, LEAST_U) }))
    .sort((a, b) => a.swing - b.swing);
  if (points.length === 0) return undefined;
  const [from, to] = [points[0]!.swing, points.at(-1)!.swing];
  if (from === to) return withoutDecay(points);
  const fit = leastSquares(
    (unknowns) => {
      const [law, first, last] = unknowns as [number, number, number];
      const amplitude = amplitudeAlong({ from, to, law, first, last });
      return [...points.map((p) => (amplitude(p.swing) - p.amplitude) / p.u), unknowns[0]! / LAW_U];
    },
    [0, points[0]!.amplitude, points.at(-1)!.amplitude],
    ([law, first, last]) => [Math.min(Math.max(law!, -1), 1), Math.max(first!, 1e-5), Math.max(last!, 1e-5)],
  );
  if (!fit) return withoutDecay(points);
  const [, first, last] = fit.unknowns;
  if (last! >= first!) return { ...constant(points), decayKnown: true };

  // Readings that scatter more than they claim are given the uncertainty they show.
  const spare = points.length - 3;
  const birge = spare > 0 ? Math.max(1, Math.sqrt(fit.chiSquare / spare)) : 1;
  const spread = cholesky(fit.covariance);
  if (!spread) return withoutDecay(points);
  const doubts = spread.map((_, k): CurveDoubt => {
    const moved = (sign: number) => fit.unknowns.map((v, i) => v + sign * birge * spread[i]![k]!);
    return {
      // The law comes first, so its column holds all it can do; the others are what remains at a fixed law.
      term: k === 0 ? 'decay' : 'amplitude',
      curves: [1, -1].map((sign) => curveOf(moved(sign), from, to)),
      weight: 1,
    };
  });
  return { curve: curveOf(fit.unknowns, from, to), decayKnown: true, doubts };
}

function curveOf([law, first, last]: number[], from: number, to: number): AmplitudeCurve {
  const start = Math.max(first!, 1e-6);
  return { from, to, first: start, last: Math.min(Math.max(last!, 1e-6), start), law: Math.min(Math.max(law!, -1), 1) };
}

function constant(points: AmplitudePoint[]): AmplitudeFit {
  const weight = points.reduce((sum, p) => sum + 1 / p.u ** 2, 0);
  const mean = points.reduce((sum, p) => sum + p.amplitude / p.u ** 2, 0) / weight;
  const at = (amplitude: number): AmplitudeCurve => {
    const a = Math.max(amplitude, 1e-6);
    return { from: points[0]!.swing, to: points[0]!.swing, first: a, last: a, law: 0 };
  };
  const u = 1 / Math.sqrt(weight);
  return {
    curve: at(mean),
    decayKnown: false,
    doubts: [{ term: 'amplitude', curves: [at(mean + u), at(mean - u)], weight: 1 }],
  };
}

function withoutDecay(points: AmplitudePoint[]): AmplitudeFit {
  const level = constant(points);
  const { from, first } = level.curve;
  const lost = MOST_LOST + MOST_LOST_PER_RAD * first;
  const fastest = { from, to: from + 1, first, last: first * exp(-lost), law: 0 };
  // Anything from no decay to the fastest, taken as rectangular about its no-decay end.
  return { ...level, doubts: [...level.doubts, { term: 'decay', curves: [fastest], weight: 1 / Math.sqrt(3) }] };
}
