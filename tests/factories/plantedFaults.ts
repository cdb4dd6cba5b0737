import type { FlagCode } from '@shared/schemas/edit';
import type { Capture, RawRun } from '@shared/schemas/run';
import { SCENARIOS, type Scenario } from './noisyRuns';
import { angleReading, stringRig } from './rawRuns';

/** A thing that goes wrong when pendulums are timed, and the flag that should name it. */
export interface Fault {
  code: FlagCode;
  what: string;
  scenario: Scenario;
  plant(run: RawRun, uniform: () => number, smallPeriod: number): RawRun;
}

const named = (name: string) => SCENARIOS.find((scenario) => scenario.name === name)!;
const perSwing = named('60° viscous, a tap a swing');
const perPass = named('20° quadratic, a tap a pass');
const gate = named('60° quadratic, a gate');
const keyed = named('15° viscous, keyed total');

const US = 1e6;

/** Marks of a tapped run changed in s; they come back rising and from 0. */
function retimed(run: RawRun, change: (times: number[]) => number[]): RawRun {
  if (run.capture.kind !== 'tap') throw new Error('not taps');
  const times = change(run.capture.mark_us.map((us) => us / US));
  return { ...run, capture: { ...run.capture, mark_us: times.map((t) => Math.round((t - times[0]!) * US)) } };
}

/** The place of a mark inside the run, with `aside` marks on either side. */
const placeIn = (times: unknown[], uniform: () => number, aside = 1) =>
  aside + Math.floor(uniform() * (times.length - 2 * aside));

const withCapture = (run: RawRun, capture: Capture): RawRun => ({ ...run, capture });

/** One or more for every flag that judges by chance; `clock_gap` and `cut_short` tell what the pad wrote down. */
export const FAULTS: Fault[] = [
  {
    ...{ code: 'double', what: 'one tap struck again after 80 to 200 ms', scenario: perSwing },
    plant: (run, uniform) =>
      retimed(run, (times) => {
        const at = placeIn(times, uniform);
        return times.toSpliced(at + 1, 0, times[at]! + 0.08 + 0.12 * uniform());
      }),
  },
  {
    ...{ code: 'missed', what: 'one tap left out', scenario: perSwing },
    plant: (run, uniform) => retimed(run, (times) => times.toSpliced(placeIn(times, uniform), 1)),
  },
  {
    ...{ code: 'half_swings', what: 'every pass tapped as if it were a swing', scenario: perPass },
    plant: (run) => withCapture(run, run.capture.kind === 'tap' ? { ...run.capture, swings_per_mark: 1 } : run.capture),
  },
  {
    ...{ code: 'count_from_one', what: 'one swing too many written down', scenario: keyed },
    plant: (run) =>
      withCapture(
        run,
        run.capture.kind === 'keyed_total' ? { ...run.capture, counted_to: run.capture.counted_to + 1 } : run.capture,
      ),
  },
  {
    ...{ code: 'late_first_mark', what: 'a first tap 0.2 to 0.5 s late', scenario: perSwing },
    plant: (run, uniform) => retimed(run, ([first, ...others]) => [first! + 0.2 + 0.3 * uniform(), ...others]),
  },
  {
    ...{ code: 'outlier', what: 'one tap 0.25 to 0.5 s late', scenario: perSwing },
    plant: (run, uniform) =>
      retimed(run, (times) => {
        const at = placeIn(times, uniform);
        return times.with(at, times[at]! + 0.25 + 0.25 * uniform());
      }),
  },
  {
    ...{ code: 'chatter', what: 'one block broken for 50 µs', scenario: gate },
    plant: (run, uniform) => {
      if (run.capture.kind !== 'gate') return run;
      const { block_us } = run.capture;
      const at = placeIn(block_us, uniform);
      const [on, off] = block_us[at]!;
      const cut = Math.round(on + (0.2 + 0.6 * uniform()) * (off - on));
      return withCapture(run, { ...run.capture, block_us: block_us.toSpliced(at, 1, [on, cut], [cut + 50, off]) });
    },
  },
  {
    ...{ code: 'off_centre', what: 'taps at a mark that makes the half swings differ by 80 ms', scenario: perPass },
    plant: (run) => retimed(run, (times) => times.map((t, i) => t + (i % 2) * 0.04)),
  },
  {
    ...{
      code: 'off_centre',
      what: 'a gate 1 to 4° beside the lowest point',
      scenario: named('25° viscous, a gate off centre'),
    },
    plant: (run) => run,
  },
  {
    ...{ code: 'pause', what: 'swinging held up for a time of any length up to two laps', scenario: perSwing },
    plant: (run, uniform, smallPeriod) =>
      retimed(run, (times) => {
        const at = placeIn(times, uniform, 4);
        const held = 2 * smallPeriod * uniform();
        return times.map((t, i) => (i < at ? t : t + held));
      }),
  },
  {
    ...{ code: 'drift', what: 'T0 longer by 2 % at the end, evenly', scenario: perSwing },
    plant: (run) => retimed(run, (times) => times.map((t) => t + (0.01 * t * t) / times.at(-1)!)),
  },
  {
    ...{ code: 'drift', what: 'a gate whose pendulum slips by 2 mm on a metre half way', scenario: gate },
    plant: (run) => {
      if (run.capture.kind !== 'gate') return run;
      const { block_us } = run.capture;
      const middle = block_us[Math.floor(block_us.length / 2)]![0];
      const slipped = (us: number) => Math.round(us + 0.001 * Math.max(us - middle, 0));
      return withCapture(run, { ...run.capture, block_us: block_us.map(([on, off]) => [slipped(on), slipped(off)]) });
    },
  },
  {
    ...{
      code: 'round_numbers',
      what: 'splits typed to the tenth of a stopwatch that shows hundredths',
      scenario: perSwing,
    },
    plant: (run) => splits(run, (t) => Math.round(10 * t) / 10),
  },
  {
    ...{ code: 'round_numbers', what: 'splits worked out from one period', scenario: perSwing },
    plant: (run, _, smallPeriod) => splits(run, (_t, i) => Math.round(100 * 1.03 * smallPeriod * i) / 100),
  },
  {
    ...{ code: 'implausible', what: 'a length read at half of what it is', scenario: perSwing },
    plant: (run, _, smallPeriod) => ({
      ...run,
      rig: stringRig({ length_readings: [{ to: 'centre', um: Math.round(124_000 * smallPeriod ** 2) }] }),
    }),
  },
  {
    ...{ code: 'implausible', what: 'amplitudes given the wrong way round', scenario: perSwing },
    plant: (run) => ({ ...run, amplitudes: [angleReading(0, 35), angleReading(30, 60)] }),
  },
];

/** The taps of a run as splits typed from a stopwatch of hundredths. */
function splits(run: RawRun, typed: (time: number, place: number) => number): RawRun {
  if (run.capture.kind !== 'tap') throw new Error('not taps');
  const mark_us = run.capture.mark_us.map((us, i) => Math.round(typed(us / US, i) * US));
  return withCapture(run, { kind: 'keyed_splits', swings_per_mark: 1, mark_us, reading_step_us: 10_000 });
}
