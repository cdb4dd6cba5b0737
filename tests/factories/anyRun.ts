import fc from 'fast-check';
import type { EditChange } from '@shared/schemas/edit';
import type { AmplitudeReading, Rig } from '@shared/schemas/rig';
import type { Capture, RawRun, TapCapture } from '@shared/schemas/run';
import { FIRST_COUNTS } from '@shared/schemas/run';
import { BOB_SHAPES, RIG_KINDS } from '@shared/schemas/rig';
import { FLAG_CODES } from '@shared/schemas/edit';
import { rawTapRun, uuid } from './rawRuns';

/** Runs and edits of every shape the schema lets through, sensible or not. */

const lengthUm = fc.integer({ min: 1, max: 50_000_000 });
const swingsPerMark = fc.constantFrom(0.5, 1, 2, 5, 20);
const stepUs = fc.integer({ min: 1, max: 1_000_000 });

/** Strictly rising from 0; laps from a microsecond to a minute. */
const risingUs = (most: number) =>
  fc
    .array(fc.oneof(fc.integer({ min: 1, max: 60_000_000 }), fc.integer({ min: 1_900_000, max: 2_100_000 })), {
      maxLength: most,
    })
    .map((laps) => laps.reduce((us, lap) => [...us, us.at(-1)! + lap], [0]));

const tap = fc.record({
  kind: fc.constant('tap' as const),
  swings_per_mark: swingsPerMark,
  planned_swings: fc.option(fc.integer({ min: 1, max: 1_000 })),
  mark_us: risingUs(40),
  missed: fc.array(
    fc.record({ before_mark: fc.integer({ min: 1, max: 40 }), count: fc.integer({ min: 1, max: 50 }) }),
    { maxLength: 3 },
  ),
  rejected: fc.constant<TapCapture['rejected']>([]),
  inputs: fc.constant<TapCapture['inputs']>(['touch']),
  clock: fc.record({
    step_us: fc.integer({ min: 0, max: 1_000_000 }),
    isolated: fc.boolean(),
    anchors: fc.constant<TapCapture['clock']['anchors']>([]),
  }),
  events: fc.array(
    fc.record({
      kind: fc.constantFrom('clock_gap' as const, 'hidden' as const),
      at_us: fc.integer({ min: -1_000, max: 1_000_000 }),
      after_mark: fc.integer({ min: -1, max: 50 }),
    }),
    { maxLength: 3 },
  ),
  ended: fc.constantFrom('planned' as const, 'held' as const, 'cut_short' as const),
});

const keyedTotal = fc.record({
  kind: fc.constant('keyed_total' as const),
  counted_to: fc.integer({ min: 1, max: 1_000 }),
  first_count: fc.constantFrom(...FIRST_COUNTS),
  total_us: fc.integer({ min: 1, max: 43_200_000_000 }),
  reading_step_us: stepUs,
});

const keyedSplits = fc.record({
  kind: fc.constant('keyed_splits' as const),
  swings_per_mark: swingsPerMark,
  mark_us: risingUs(20).filter((us) => us.length >= 2),
  reading_step_us: stepUs,
});

const gate = fc.record({
  kind: fc.constant('gate' as const),
  block_us: risingUs(30)
    .filter((us) => us.length >= 2)
    .map((us) =>
      us.flatMap((on, i): [number, number][] =>
        i + 1 < us.length ? [[on, on + Math.ceil((us[i + 1]! - on) / 7)]] : [],
      ),
    ),
  flag_width_um: fc.option(fc.integer({ min: 1, max: 1_000_000 })),
  flag_distance_um: fc.option(lengthUm),
  reading_step_us: stepUs,
});

const amplitudes: fc.Arbitrary<AmplitudeReading[]> = fc.array(
  fc.record({
    swing: fc.oneof(fc.constantFrom(0, 10, 20), fc.double({ min: 0, max: 100_000, noNaN: true })),
    as_read: fc.oneof(
      fc.record({ form: fc.constant('angle' as const), mdeg: fc.integer({ min: 1, max: 179_000 }) }),
      fc.record({ form: fc.constant('sideways' as const), sideways_um: lengthUm, length_um: lengthUm }),
    ),
    u: fc.integer({ min: 0, max: 1_000_000 }),
  }),
  { maxLength: 5 },
);

const massMg = fc.oneof(fc.integer({ min: 1, max: 100_000_000 }), fc.constantFrom(300, 110_000));
const inertia = fc.integer({ min: 0, max: 10_000_000_000 });

const oldRig = {
  kind: fc.constantFrom(...RIG_KINDS),
  length_readings: fc.array(
    fc.record({ to: fc.constantFrom('centre' as const, 'top' as const, 'bottom' as const), um: lengthUm }),
    { maxLength: 8 },
  ),
  bob_diameter_um: fc.option(lengthUm),
  length_u_um: fc.integer({ min: 0, max: 1_000_000 }),
  bar_length_um: fc.option(lengthUm),
  pivot_offset_um: fc.option(fc.integer({ min: 0, max: 50_000_000 })),
  label: fc.constant(''),
};
const laterReadings = {
  bob_mass_mg: massMg,
  bob_shape: fc.constantFrom(...BOB_SHAPES),
  string_mass_mg: massMg,
  bar_mass_mg: massMg,
  mass_u_mg: fc.integer({ min: 0, max: 1_000_000 }),
  bar_width_um: lengthUm,
  inner_diameter_um: lengthUm,
  centre_distance_um: lengthUm,
  gyration_um: fc.integer({ min: 0, max: 50_000_000 }),
  hub_inertia_g_mm2: inertia,
  hub_inertia_u_g_mm2: inertia,
  support_stiffness_n_per_m: fc.integer({ min: 100, max: 1_000_000_000 }),
};
const rig: fc.Arbitrary<Rig> = fc.record(
  { ...oldRig, ...laterReadings },
  { requiredKeys: Object.keys(oldRig) as (keyof typeof oldRig)[] },
);

const anyCapture: fc.Arbitrary<Capture> = fc.oneof(tap, keyedTotal, keyedSplits, gate);

export const anyRun: fc.Arbitrary<RawRun> = fc
  .record({
    capture: anyCapture,
    rig: fc.option(rig),
    amplitudes,
  })
  .map((parts) => ({ ...rawTapRun(), ...parts }));

const mark = fc.integer({ min: 0, max: 45 });

export const anyChange: fc.Arbitrary<EditChange> = fc.oneof(
  fc.record({ kind: fc.constant('leave_out_mark' as const), mark }),
  fc.record({ kind: fc.constant('insert_gap' as const), before_mark: mark, count: fc.integer({ min: 1, max: 50 }) }),
  fc.record({ kind: fc.constant('keep_part' as const), from_mark: mark, to_mark: mark }),
  fc.record({ kind: fc.constant('reread_as_half_swings' as const) }),
  fc.record({ kind: fc.constant('set_swings' as const), swings: fc.double({ min: 0.5, max: 1_000, noNaN: true }) }),
  fc.record({ kind: fc.constant('set_rig' as const), rig }),
  fc.record({ kind: fc.constant('set_amplitudes' as const), amplitudes }),
  fc.record({ kind: fc.constant('note' as const), text: fc.constant('windy') }),
  fc.record({
    kind: fc.constant('keep_flagged' as const),
    flag: fc.constantFrom(...FLAG_CODES),
    mark: fc.option(mark),
  }),
  fc.record({ kind: fc.constant('set_aside' as const) }),
  fc.record({
    kind: fc.constant('withdraw' as const),
    edit_id: fc.integer({ min: 1, max: 8 }).map((n) => uuid(0xed000 + n)),
  }),
);
