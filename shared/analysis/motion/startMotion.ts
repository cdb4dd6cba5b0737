import { amplitudeFromBlock } from '../../physics/blockSpeed';
import { periodRatio } from '../../physics/periodRatio';
import { fitLine } from '../../statistics/fitLine';
import { quantile } from '../../statistics/quantile';
import type { MotionData } from './motionData';
import { exp, log, sin } from '../../physics/elementary';
import { hypot } from '../../statistics/hypot';

/** A first idea of a motion, from which a fit sets out. */
export interface MotionStart {
  start: number;
  period: number;
  limp: number;
  /** Amplitude at swing `from`, and the one losses are counted at, rad. */
  amplitude: number;
  reference: number;
  gateAngle: number;
  /** Share of the amplitude lost in a swing, and how far each term of damping may be from a third of it. */
  loss: number;
  lossSpread: number;
  /** Standard deviation of a mark about a straight line, s. */
  jitter: number;
  decayKnown: boolean;
}

/**
 * Losses to reckon with when only one amplitude was read: mean and, as much again, their spread; more at
 * large amplitudes, where drag grows with the speed. Common practice, no source.
 */
const USUAL_LOSS = 0.005;
const USUAL_LOSS_PER_RAD = 0.0125;
/** In a mean loss of its own size: the sum of three terms then spreads by 1.15 of it. */
const SPREAD_WHEN_GUESSED = 0.67;
const LEAST_LOSS = 1e-4;
const MOST_LOSS = 0.5;

/** @returns undefined when nothing tells the amplitude, it is next to none, or the marks lie on no line */
export function startMotion(data: MotionData, from: number): MotionStart | undefined {
  const line = fitLine(data.swings, data.times, data.isOdd);
  if (!line || !(line.slope > 0)) return undefined;
  const spare = Math.max(line.residuals.length - line.basis.length, 1);
  const jitter = Math.sqrt(line.residuals.reduce((sum, r) => sum + r * r, 0) / spare);
  const points = [...data.readings, ...(data.gate ? fromBlocks(data, line.slope, line.offset) : [])];
  if (points.length === 0 || points.some(({ amplitude }) => !(amplitude > LEAST_AMPLITUDE))) return undefined;
  points.sort((a, b) => a.swing - b.swing);
  const [first, last] = [points[0]!, points.at(-1)!];
  const apart = last.swing - first.swing;
  const decayKnown = apart > 0;
  const guessed = USUAL_LOSS + USUAL_LOSS_PER_RAD * first.amplitude;
  const read = log(first.amplitude / last.amplitude) / apart;
  const readU = hypot(first.u / first.amplitude, last.u / last.amplitude) / apart;
  const loss = decayKnown ? Math.min(Math.max(read, readU, LEAST_LOSS), MOST_LOSS) : guessed;
  const amplitude = Math.min(first.amplitude * exp(loss * Math.min(first.swing - from, 20)), LARGEST);
  return {
    start: line.intercept,
    period: line.slope / periodRatio((2 * first.amplitude + last.amplitude) / 3),
    limp: line.offset,
    amplitude,
    reference: decayKnown ? Math.sqrt(first.amplitude * last.amplitude) : first.amplitude,
    gateAngle: last.amplitude * sin(Math.max(-1.2, Math.min(1.2, (Math.PI * line.offset) / line.slope))),
    loss,
    lossSpread: decayKnown ? loss : SPREAD_WHEN_GUESSED * loss,
    jitter,
    decayKnown,
  };
}

/** rad. With less, at any reading, there is no swing to tell losses from. */
const LEAST_AMPLITUDE = 1e-5;
/** rad. */
const LARGEST = (176 / 180) * Math.PI;

/** Two amplitudes from the speed of the flag: in the first third of the blocks, and in the last. */
function fromBlocks({ swings, gate }: MotionData, slope: number, limp: number) {
  const blocked = gate?.blocked;
  if (!blocked) return [];
  const third = Math.max(Math.floor(blocked.length / 3), 1);
  return [0, blocked.length - third].flatMap((at) => {
    const middle = quantile(blocked.slice(at, at + third), 0.5);
    const swing = swings.slice(at, at + third).reduce((sum, n) => sum + n, 0) / third;
    let amplitude = amplitudeFromBlock(gate.flag, middle, slope);
    for (let turn = 0; turn < 6 && amplitude !== undefined; turn += 1) {
      const small = slope / periodRatio(Math.min(amplitude, LARGEST));
      const offCentre = amplitude * sin((Math.PI * Math.min(Math.abs(limp), small / 4)) / small);
      amplitude = amplitudeFromBlock(gate.flag, middle, small, offCentre) ?? amplitude;
    }
    return amplitude === undefined ? [] : [{ swing, amplitude, u: amplitude * gate.flagU }];
  });
}
