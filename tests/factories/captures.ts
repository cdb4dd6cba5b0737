import type { GateCapture, KeyedTotalCapture, TapCapture } from '@shared/schemas/run';
import type { AmplitudeReading, Rig } from '@shared/schemas/rig';

/** Captures of a pendulum of 1 m that swings in 2.006 s, as hands and gates would record it. */

const PERIOD_US = 2_006_000;
/** Offsets of a steady hand, ms, drawn once: mean 0, s.d. 30. */
const HAND_MS = [12, -31, 44, -8, -27, 19, 35, -52, 3, 28, -14, -39, 21, 47, -22, 6, -33, 15, 38, -41, 1];

export function tapped(parts: Partial<TapCapture> = {}): TapCapture {
  const first = HAND_MS[0]!;
  return {
    kind: 'tap',
    swings_per_mark: 1,
    planned_swings: 20,
    mark_us: HAND_MS.map((ms, i) => i * PERIOD_US + (ms - first) * 1000),
    missed: [],
    rejected: [],
    inputs: ['touch'],
    clock: { step_us: 100, isolated: false, anchors: [] },
    events: [],
    ended: 'planned',
    ...parts,
  };
}

/** The same taps with one more, 180 ms after mark 8. */
export function tappedWithDouble(): TapCapture {
  const { mark_us } = tapped();
  return tapped({ mark_us: [...mark_us.slice(0, 9), mark_us[8]! + 180_000, ...mark_us.slice(9)] });
}

export function keyed(parts: Partial<KeyedTotalCapture> = {}): KeyedTotalCapture {
  return {
    kind: 'keyed_total',
    counted_to: 20,
    first_count: 'zero',
    total_us: 40_150_000,
    reading_step_us: 10_000,
    ...parts,
  };
}

/** A beam broken twice a swing for 46 ms, on a clock of 0.1 ms. */
export function gated(): GateCapture {
  return {
    kind: 'gate',
    block_us: Array.from({ length: 21 }, (_, i) => {
      const on = Math.round((i * PERIOD_US) / 200) * 100;
      return [on, on + 46_000];
    }),
    flag_width_um: 25_000,
    flag_distance_um: 1_000_000,
    reading_step_us: 100,
  };
}

export const metreRig: Rig = {
  kind: 'string_bob',
  length_readings: [
    { to: 'centre', um: 999_000 },
    { to: 'centre', um: 1_001_000 },
  ],
  bob_diameter_um: 25_000,
  length_u_um: 1_000,
  bar_length_um: null,
  pivot_offset_um: null,
  label: '',
};

export const tenDegrees: AmplitudeReading[] = [
  { swing: 0, as_read: { form: 'angle', mdeg: 10_000 }, u: 500 },
  { swing: 20, as_read: { form: 'angle', mdeg: 7_000 }, u: 500 },
];
