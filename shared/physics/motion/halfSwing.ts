import type { Damping } from './damping';
import { cos, sin } from '../elementary';

/** A stretch of the way on which the angle is a polynomial of the time since its start. */
export interface Piece {
  /** Since the turning point the half swing starts from, in 1/ω0. */
  start: number;
  length: number;
  /** Coefficients of the angle, rad; the first is the angle at the start. */
  angle: Float64Array;
}

/** From rest at a turning point down through the lowest point to rest on the other side. */
export interface HalfSwing {
  duration: number;
  /** Where it comes to rest, measured to the other side; negative when it did not reach the lowest point. */
  reached: number;
  pieces: Piece[];
}

const ORDER = 20;
/** What a step may leave out, as a share of the amplitude, when passes are to be right to 1e-9 at 150°. */
export const FINE = 3e-15;
/** A half swing from 179.9° takes some thirty steps. */
const MOST_STEPS = 400;

/**
 * The pendulum's equation of motion from rest at one turning point to the next, by Taylor's series in
 * time. Between two turning points the sign of θ′ stands still, so the damping terms are analytic and
 * every step's polynomial is also the dense output.
 *
 * @param amplitude  rad, in (0, π), on the side counted as positive
 * @param tolerance  what a step may leave out, as a share of the amplitude
 * @returns          undefined when it does not set off (|sin θ| ≤ dry) or does not come to rest within
 *                   the steps (damped so strongly that it creeps)
 * @see Jorba & Zou, Exp. Math. 14, 99 (2005), for order and step (from memory)
 */
export function halfSwing(amplitude: number, damping: Damping, tolerance = FINE): HalfSwing | undefined {
  if (!(amplitude > 0 && amplitude < Math.PI) || sin(amplitude) <= damping.dry) return undefined;
  const pieces: Piece[] = [];
  let start = 0;
  let at = amplitude;
  let rate = 0;
  for (let step = 0; step < MOST_STEPS; step += 1) {
    const angle = series(at, rate, damping);
    const length = stepLength(angle, tolerance * amplitude);
    const endRate = slopeAt(angle, length);
    if (endRate >= 0) {
      const rest = rootOfSlope(angle, length);
      pieces.push({ start, length: rest, angle });
      return { duration: start + rest, reached: -valueAt(angle, rest), pieces };
    }
    pieces.push({ start, length, angle });
    start += length;
    at = valueAt(angle, length);
    rate = endRate;
  }
  return undefined;
}

/**
 * When a half swing goes through an angle.
 *
 * @param angle  rad, between −reached and the amplitude
 * @returns      time since the turning point and θ′ there, in units of ω0 (negative: downwards from the
 *               positive side); undefined when it does not get there
 */
export function passAt({ pieces }: HalfSwing, angle: number): { time: number; rate: number } | undefined {
  for (const piece of pieces) {
    const [from, to] = [piece.angle[0]!, valueAt(piece.angle, piece.length)];
    if (!(angle <= from && angle >= to)) continue;
    const since = rootOfValue(piece, angle, from, to);
    return { time: piece.start + since, rate: slopeAt(piece.angle, since) };
  }
  return undefined;
}

/** Value of a polynomial. */
export function valueAt(coefficients: Float64Array, x: number): number {
  let sum = 0;
  for (let k = ORDER; k >= 0; k -= 1) sum = sum * x + coefficients[k]!;
  return sum;
}

/** Derivative of a polynomial. */
export function slopeAt(coefficients: Float64Array, x: number): number {
  let sum = 0;
  for (let k = ORDER; k > 0; k -= 1) sum = sum * x + k * coefficients[k]!;
  return sum;
}

/** Taylor coefficients of θ while θ′ ≤ 0: θ″ = −sin θ − 2 viscous θ′ + quadratic θ′² + dry. */
function series(at: number, rate: number, { viscous, quadratic, dry }: Damping): Float64Array {
  const angle = new Float64Array(ORDER + 1);
  SINE[0] = sin(at);
  COSINE[0] = cos(at);
  angle[0] = at;
  angle[1] = rate;
  SCALED[1] = rate;
  SCALED[2] = dry - SINE[0] - 2 * viscous * rate + quadratic * rate * rate;
  angle[2] = SCALED[2] / 2;
  for (let k = 1; k <= ORDER - 2; k += 1) {
    let s = 0;
    let c = 0;
    let squared = 0;
    for (let j = 1, i = k - 1; j <= k; j += 1, i -= 1) {
      const w = SCALED[j]!;
      s += w * COSINE[i]!;
      c += w * SINE[i]!;
      squared += w * SCALED[i + 2]!;
    }
    SINE[k] = s / k;
    COSINE[k] = -c / k;
    // The j-th product of θ′² pairs coefficient j with k + 2 − j; the sum above lacks the last pair.
    squared += SCALED[k + 1]! * rate;
    const next = (quadratic * squared - SINE[k]! - 2 * viscous * SCALED[k + 1]!) / (k + 1);
    SCALED[k + 2] = next;
    angle[k + 2] = next / (k + 2);
  }
  return angle;
}

/** Scratch for `series`, written before it is read. SCALED[k] is k θ_k, the coefficients of θ′. */
const SINE = new Float64Array(ORDER + 1);
const COSINE = new Float64Array(ORDER + 1);
const SCALED = new Float64Array(ORDER + 1);

/**
 * As long as the last coefficients say that the rest of the series stays below the tolerance. Four of
 * them, because at rest and near 90° three out of four vanish.
 */
function stepLength(angle: Float64Array, allowed: number): number {
  const by = (k: number) => root(allowed / Math.max(Math.abs(angle[k]!), 1e-300), k);
  return Math.min(by(ORDER - 3), by(ORDER - 2), by(ORDER - 1), by(ORDER), LONGEST_STEP);
}

/** Shorter than half a swing, so that no turning point is stepped over. */
const LONGEST_STEP = 1.5;

/** x^(1/k) to a few digits, from square roots alone: k is near 20, and a step need not be exact. */
function root(x: number, k: number): number {
  // x^(1/16 · 16/k) with the exponent 16/k in binary digits.
  let power = 1;
  let factor = Math.sqrt(Math.sqrt(Math.sqrt(Math.sqrt(x))));
  let rest = 16 / k;
  for (let bit = 0; bit < 10; bit += 1) {
    factor = Math.sqrt(factor);
    rest *= 2;
    if (rest >= 1) {
      power *= factor;
      rest -= 1;
    }
  }
  return power;
}

/** Where θ′ is 0, between 0 and `length`; θ′ ≤ 0 at the one end and ≥ 0 at the other. */
function rootOfSlope(angle: Float64Array, length: number): number {
  let low = 0;
  let high = length;
  let x = length / 2;
  for (let turn = 0; turn < MOST_TURNS; turn += 1) {
    const slope = slopeAt(angle, x);
    if (slope >= 0) high = x;
    else low = x;
    let bend = 0;
    for (let k = ORDER; k > 1; k -= 1) bend = bend * x + k * (k - 1) * angle[k]!;
    const next = x - slope / bend;
    const inside = next > low && next < high ? next : (low + high) / 2;
    if (Math.abs(inside - x) <= 1e-16 * length + 4e-16 * x) return inside;
    x = inside;
  }
  return x;
}

/** Where the angle is passed; it falls all along the piece. */
function rootOfValue({ angle, length }: Piece, wanted: number, from: number, to: number): number {
  let low = 0;
  let high = length;
  let x = from === to ? 0 : (length * (from - wanted)) / (from - to);
  for (let turn = 0; turn < MOST_TURNS; turn += 1) {
    const off = valueAt(angle, x) - wanted;
    if (off <= 0) high = x;
    else low = x;
    const next = x - off / slopeAt(angle, x);
    const inside = next >= low && next <= high ? next : (low + high) / 2;
    if (Math.abs(inside - x) <= 4e-16 * length) return inside;
    x = inside;
  }
  return x;
}

const MOST_TURNS = 60;
