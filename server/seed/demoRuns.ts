import { v7 as uuidv7 } from 'uuid';
import type { AmplitudeReading, Rig } from '@shared/schemas/rig';
import { RUN_FORMAT, RUN_VERSION, type Capture, type RawRun } from '@shared/schemas/run';
import { sealTapRun } from '@shared/timing/sealTapRun';
import { gaussian } from './random';
import { amplitudeAfter, passTimes, speedAtPass, type Pendulum } from './swing';

/** Where, when and by which device a demo run was made. */
export interface Scene {
  random: () => number;
  wall_ms: number;
  device_id: string;
  app_version: string;
}

export interface TapPlan {
  length_m: number;
  amplitude_deg: number;
  swings: number;
  swings_per_mark?: number;
  /** What went wrong at the bench. */
  fault?: 'double' | 'missed' | 'half_swings' | 'cut_short';
  rig?: Rig;
  keptPerSwing?: number;
}

/** Hand timing scatters by about this, s. */
const JITTER = 0.022;

/** A run tapped on the pad, with a fault planted where one is asked for. */
export function tappedRun(scene: Scene, plan: TapPlan): RawRun {
  const { swings, swings_per_mark = 1, fault } = plan;
  const pendulum = pendulumOf(plan);
  const step = fault === 'half_swings' ? 1 : 2 * swings_per_mark;
  const marks = passTimes(pendulum, swings)
    .filter((_, pass) => pass % step === 0)
    .map((time) => Math.max(0, time + gaussian(scene.random) * JITTER));
  const middle = Math.floor(marks.length / 2);
  if (fault === 'double') marks.splice(middle, 0, marks[middle]! + 0.16);
  if (fault === 'missed') marks.splice(middle, 1);
  if (fault === 'cut_short') marks.splice(middle);
  marks.sort((a, b) => a - b);
  const sealed = sealTapRun(
    {
      id: uuidv7({ msecs: scene.wall_ms }),
      plan: {
        swings_per_mark,
        planned_swings: swings,
        rig: plan.rig ?? stringAndBob(plan.length_m),
        amplitudes: readings(pendulum, fault === 'cut_short' ? null : swings),
      },
      started_wall_ms: scene.wall_ms,
      zone_offset_min: 60,
      clock_step_us: 100,
      isolated: false,
      events: marks.map((time, i) => ({
        seq: i + 1,
        at_ms: 2_000 + time * 1_000,
        wall_ms: Math.round(scene.wall_ms + time * 1_000),
        kind: 'mark',
        input: 'touch',
      })),
    },
    fault === 'cut_short' ? 'cut_short' : 'planned',
    { app_version: scene.app_version, device_id: scene.device_id, cautions_seen_wall_ms: scene.wall_ms },
  );
  return sealed!;
}

/** A total read from a hand stopwatch. With 'one' the counter began at one, so a swing fewer was timed. */
export function keyedTotal(scene: Scene, plan: TapPlan, first_count: 'zero' | 'one' | 'not_sure'): RawRun {
  const pendulum = pendulumOf(plan);
  const swings = first_count === 'zero' ? plan.swings : plan.swings - 1;
  const total = passTimes(pendulum, swings).at(-1)! + gaussian(scene.random) * 0.08;
  return keptRun(scene, plan, pendulum, swings, {
    kind: 'keyed_total',
    counted_to: plan.swings,
    first_count,
    total_us: Math.round(total * 100) * 10_000,
    reading_step_us: 10_000,
  });
}

/** Splits read from a hand stopwatch, one a swing. */
export function keyedSplits(scene: Scene, plan: TapPlan): RawRun {
  const pendulum = pendulumOf(plan);
  const splits = passTimes(pendulum, plan.swings).filter((_, pass) => pass % 2 === 0);
  return keptRun(scene, plan, pendulum, plan.swings, {
    kind: 'keyed_splits',
    swings_per_mark: 1,
    mark_us: splits.map((time, i) =>
      i === 0 ? 0 : Math.round((time + gaussian(scene.random) * JITTER) * 100) * 10_000,
    ),
    reading_step_us: 10_000,
  });
}

/** A gate at the lowest point: every pass blocks it for as long as the flag takes to go through. */
export function gateRun(scene: Scene, plan: TapPlan, flag: { width_m: number; distance_m: number }): RawRun {
  const pendulum = pendulumOf(plan);
  const blocks = passTimes(pendulum, plan.swings).map((time, pass): [number, number] => {
    const speed = speedAtPass(pendulum, amplitudeAfter(pendulum, pass / 2), flag.distance_m);
    const half = flag.width_m / speed / 2;
    return [time - half, time + half];
  });
  const start = blocks[0]![0];
  return keptRun(scene, plan, pendulum, plan.swings, {
    kind: 'gate',
    block_us: blocks.map(([on, off]) => [micro(on - start), micro(off - start)]),
    flag_width_um: micro(flag.width_m),
    flag_distance_um: micro(flag.distance_m),
    reading_step_us: 10,
  });
}

/** A bar on a pivot; its reduced length is worked out from the same figures as the rig. */
export function bar(length_m: number, pivotToMiddle_m: number): { rig: Rig; length_m: number } {
  return {
    rig: { ...EMPTY_RIG, kind: 'bar', bar_length_um: micro(length_m), pivot_offset_um: micro(pivotToMiddle_m) },
    length_m: (length_m ** 2 / 12 + pivotToMiddle_m ** 2) / pivotToMiddle_m,
  };
}

const micro = (n: number) => Math.round(n * 1e6);

const EMPTY_RIG: Rig = {
  kind: 'string_bob',
  length_readings: [],
  bob_diameter_um: null,
  length_u_um: 1_000,
  bar_length_um: null,
  pivot_offset_um: null,
  label: '',
};

const stringAndBob = (length_m: number): Rig => ({
  ...EMPTY_RIG,
  length_readings: [{ to: 'centre', um: micro(length_m) }],
  bob_diameter_um: 25_000,
  // Steel.
  bob_mass_mg: 64_000,
});

const pendulumOf = ({ length_m, amplitude_deg, keptPerSwing = 0.994 }: TapPlan): Pendulum => ({
  reducedLength: length_m,
  amplitude_deg,
  keptPerSwing,
});

/** Read off a protractor at the start, and after `swings` unless the run broke off before. */
function readings(pendulum: Pendulum, swings: number | null): AmplitudeReading[] {
  return [0, ...(swings === null ? [] : [swings])].map((swing) => ({
    swing,
    as_read: { form: 'angle', mdeg: Math.round(amplitudeAfter(pendulum, swing) * 2) * 500 },
    u: 500,
  }));
}

function keptRun(scene: Scene, plan: TapPlan, pendulum: Pendulum, swings: number, capture: Capture): RawRun {
  return {
    format: RUN_FORMAT,
    version: RUN_VERSION,
    id: uuidv7({ msecs: scene.wall_ms }),
    capture,
    rig: plan.rig ?? stringAndBob(plan.length_m),
    amplitudes: readings(pendulum, swings),
    note: '',
    made: {
      wall_ms: scene.wall_ms,
      zone_offset_min: 60,
      app_version: scene.app_version,
      device_id: scene.device_id,
      cautions_seen_wall_ms: scene.wall_ms,
    },
  };
}
