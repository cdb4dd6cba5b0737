import type { Damping } from '@shared/physics/motion/damping';
import { passOf, releaseMotion, type Motion } from '@shared/physics/motion/motion';
import type { RawRun } from '@shared/schemas/run';
import { degrees, radians } from '@shared/units/angle';
import { noise } from './noise';
import { angleReading, rawGateRun, rawKeyedRun, rawTapRun } from './rawRuns';

/** A way people time pendulums, with the truth about one. */
export interface Scenario {
  name: string;
  /** T0, s. */
  smallPeriod: number;
  releaseDeg: number;
  damping: Damping;
  swings: number;
  how:
    | { kind: 'tap'; at: 'pass' | 'turn'; swingsPerMark: 0.5 | 1 | 5; jitter: number; lag1?: number }
    | { kind: 'gate'; offCentreDeg: number; edgeNoise: number }
    | { kind: 'keyed'; jitter: number };
  /** Swings at which the amplitude is read, and how well, degrees. */
  read: { swings: number[]; u: number };
}

const none: Damping = { viscous: 0, quadratic: 0, dry: 0 };
const steady = { kind: 'tap', at: 'pass', swingsPerMark: 1, jitter: 0.035 } as const;

/** 5° to 150°; taps once a swing, at every pass and every fifth swing, gates, keyed totals; all three laws of damping. */
export const SCENARIOS: Scenario[] = [
  {
    name: '5° viscous, a tap a swing',
    ...{ smallPeriod: 2.0064, releaseDeg: 5, damping: { ...none, viscous: 0.0007 }, swings: 20, how: steady },
    read: { swings: [0, 20], u: 0.5 },
  },
  {
    name: '20° quadratic, a tap a pass',
    ...{ smallPeriod: 2.0064, releaseDeg: 20, damping: { ...none, quadratic: 0.02 }, swings: 20 },
    how: { ...steady, swingsPerMark: 0.5 },
    read: { swings: [0, 10, 20], u: 1 },
  },
  {
    name: '45° dry, a tap a swing',
    ...{ smallPeriod: 1.4187, releaseDeg: 45, damping: { ...none, dry: 0.004 }, swings: 20, how: steady },
    read: { swings: [0, 10, 20], u: 1 },
  },
  {
    name: '60° viscous, a tap a swing',
    ...{ smallPeriod: 1.7376, releaseDeg: 60, damping: { ...none, viscous: 0.004 }, swings: 30, how: steady },
    read: { swings: [0, 15, 30], u: 1 },
  },
  {
    name: '90° quadratic, a tap a turning point',
    ...{ smallPeriod: 1.6382, releaseDeg: 90, damping: { ...none, quadratic: 0.06 }, swings: 24 },
    how: { ...steady, at: 'turn' },
    read: { swings: [0, 12, 24], u: 1 },
  },
  {
    name: '150° quadratic, a tap a swing',
    ...{ smallPeriod: 1.6382, releaseDeg: 150, damping: { ...none, quadratic: 0.05 }, swings: 24, how: steady },
    read: { swings: [0, 5, 12, 24], u: 1 },
  },
  {
    name: '25° viscous, a gate off centre',
    ...{ smallPeriod: 1.9034, releaseDeg: 25, damping: { ...none, viscous: 0.0012 }, swings: 15 },
    how: { kind: 'gate', offCentreDeg: 3, edgeNoise: 2e-5 },
    read: { swings: [0], u: 1 },
  },
  {
    name: '60° quadratic, a gate',
    ...{ smallPeriod: 1.9034, releaseDeg: 60, damping: { ...none, quadratic: 0.01 }, swings: 15 },
    how: { kind: 'gate', offCentreDeg: 0, edgeNoise: 2e-5 },
    read: { swings: [0], u: 1 },
  },
  {
    name: '15° viscous, keyed total',
    ...{ smallPeriod: 1.6051, releaseDeg: 15, damping: { ...none, viscous: 0.0008 }, swings: 20 },
    how: { kind: 'keyed', jitter: 0.07 },
    read: { swings: [0], u: 1 },
  },
  {
    name: '45° quadratic, keyed total',
    ...{ smallPeriod: 1.6051, releaseDeg: 45, damping: { ...none, quadratic: 0.01 }, swings: 20 },
    how: { kind: 'keyed', jitter: 0.07 },
    read: { swings: [0, 20], u: 1 },
  },
  {
    name: '25° viscous, a tap every fifth swing',
    ...{ smallPeriod: 2.0064, releaseDeg: 25, damping: { ...none, viscous: 0.0012 }, swings: 50 },
    how: { ...steady, swingsPerMark: 5 },
    read: { swings: [0, 50], u: 1 },
  },
  {
    name: '20° viscous, taps of lag-1 correlation 0.4',
    ...{ smallPeriod: 2.0064, releaseDeg: 20, damping: { ...none, viscous: 0.0012 }, swings: 30 },
    how: { ...steady, lag1: 0.4 },
    read: { swings: [0, 15, 30], u: 1 },
  },
];

/** Standard uncertainties the analysis states for a clock's rate and a flag's width, m. */
const CLOCK_RATE_U = 50e-6 / Math.sqrt(3);
const FLAG_WIDTH_U = 0.2e-3 / Math.sqrt(3);
const FLAG_WIDTH = 25e-3;

/**
 * Draws noisy copies of a run: hands, reading of angles, clock rate, gate edges and the flag's width all err
 * as the analysis says they may. The motion under them is the integrated one.
 *
 * @returns a function that gives the next copy
 */
export function noisyRuns(scenario: Scenario, seed: number): () => RawRun {
  const { normal } = noise(seed);
  const { smallPeriod, releaseDeg, damping, swings, how, read } = scenario;
  const unit = smallPeriod / (2 * Math.PI);
  const motion = releaseMotion(radians(releaseDeg), damping, 2 * swings + 2);
  const amplitudeAfter = (swing: number) => degrees(motion.turns[2 * swing]!.amplitude);
  return () => {
    const rate = 1 + CLOCK_RATE_U * normal();
    const amplitudes = read.swings.map((swing) =>
      angleReading(swing, Math.max(amplitudeAfter(swing) + read.u * normal(), 0.1), read.u),
    );
    if (how.kind === 'keyed') {
      const total = unit * motion.turns[2 * swings]!.time + how.jitter * (normal() - normal());
      return rawKeyedRun({ counted_to: swings, total: Math.round(100 * total * rate) / 100, amplitudes });
    }
    if (how.kind === 'gate') return gateRun(motion, scenario, amplitudes, { rate, unit, normal });
    const keeps = how.lag1 ?? 0;
    let error = normal();
    const times = Array.from({ length: Math.round(swings / how.swingsPerMark) + 1 }, (_, i) => {
      const turn = Math.round(2 * i * how.swingsPerMark);
      const time = how.at === 'turn' ? motion.turns[turn]!.time : passOf(motion, turn)!.time;
      error = keeps * error + Math.sqrt(1 - keeps * keeps) * normal();
      return rate * unit * time + how.jitter * error;
    });
    return rawTapRun({ times, amplitudes, capture: { swings_per_mark: how.swingsPerMark } });
  };
}

function gateRun(
  motion: Motion,
  { swings, how }: Scenario,
  amplitudes: RawRun['amplitudes'],
  { rate, unit, normal }: { rate: number; unit: number; normal: () => number },
): RawRun {
  if (how.kind !== 'gate') throw new Error('not a gate');
  const flag = FLAG_WIDTH + FLAG_WIDTH_U * normal();
  const blocks = Array.from({ length: 2 * swings + 1 }, (_, turn): [number, number] => {
    const side = turn % 2 === 0 ? 1 : -1;
    const edge = (by: number) =>
      rate * unit * passOf(motion, turn, radians(how.offCentreDeg) + side * by * (flag / 2))!.time +
      how.edgeNoise * normal();
    return [edge(1), edge(-1)];
  });
  const flag_width_um = Math.round(FLAG_WIDTH * 1e6);
  return rawGateRun({ blocks, amplitudes, capture: { flag_width_um, flag_distance_um: 1_000_000 } });
}
