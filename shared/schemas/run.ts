import { z } from 'zod';
import { INPUTS, RUN_FORMAT, RUN_VERSION } from './formats';
import { Note, RunUs, SignedRunUs, Uuid, WallMs } from './common';
import { MAX_BLOCKS, MAX_MARKS, MAX_RUN_US, MAX_SWINGS } from './limits';
import { AmplitudeReading, Rig } from './rig';

export { INPUTS, RUN_FORMAT, RUN_VERSION };
export type TapInput = (typeof INPUTS)[number];

/**
 * The raw part of a run: what was recorded, and nothing that is computed or changed later.
 * It never changes once sealed. Its canonical text (canonical.ts) is stored and sent byte for byte.
 */

/** Strictly rising, starting at the first mark. */
const rising = (least: number, most: number) =>
  z
    .array(RunUs)
    .min(least)
    .max(most)
    .refine((us) => us[0] === 0, 'the first mark is at 0')
    .refine((us) => us.every((t, i) => i === 0 || t > us[i - 1]!), 'marks must rise');

/** 0.5: every pass. 1: once a swing. k: once every k swings. */
export const SwingsPerMark = z.union([z.literal(0.5), z.int().min(1).max(20)]);

/** Something that happened while timing. `at_us` counts from the first mark; `after_mark` is −1 before it. */
export const RunEvent = z.strictObject({
  kind: z.enum(['hidden', 'shown', 'frozen', 'resumed', 'page_hidden', 'rotated', 'clock_gap', 'screen_may_sleep']),
  at_us: SignedRunUs,
  after_mark: z.int().min(-1).max(MAX_MARKS),
  /** clock_gap: how far the wall clock moved against the monotonic one, ms. */
  wall_minus_mono_ms: z.int().optional(),
});
export type RunEvent = z.infer<typeof RunEvent>;

/** A contact that did not become a mark, or a mark that was taken back. */
export const Rejected = z.strictObject({
  why: z.enum(['bounce', 'palm', 'undone', 'key_repeat', 'untrusted']),
  at_us: SignedRunUs,
});

export const Clock = z.strictObject({
  /** Smallest step seen of the event clock, µs. */
  step_us: z.int().min(0).max(1_000_000),
  isolated: z.boolean(),
  /** Pairs of monotonic and wall clock, to see sleep and clock changes. */
  anchors: z.array(z.strictObject({ at_us: SignedRunUs, wall_ms: WallMs })).max(MAX_MARKS + 10),
});

export const TapCapture = z.strictObject({
  kind: z.literal('tap'),
  swings_per_mark: SwingsPerMark,
  planned_swings: z.int().min(1).max(MAX_SWINGS).nullable(),
  mark_us: rising(1, MAX_MARKS),
  /** Passes the tapper said were missed at once: `count` marks missing before mark number `before_mark`. */
  missed: z
    .array(z.strictObject({ before_mark: z.int().min(1).max(MAX_MARKS), count: z.int().min(1).max(50) }))
    .max(200),
  rejected: z.array(Rejected).max(MAX_MARKS),
  inputs: z.array(z.enum(INPUTS)).max(INPUTS.length),
  clock: Clock,
  events: z.array(RunEvent).max(1_000),
  ended: z.enum(['planned', 'held', 'cut_short']),
});

/** What the counter said at the first pass; 'one' means the reading holds a swing fewer than was said. */
export const FIRST_COUNTS = ['zero', 'one', 'not_sure'] as const;

export const KeyedTotalCapture = z.strictObject({
  kind: z.literal('keyed_total'),
  /** The last number said aloud, as it was said. */
  counted_to: z.int().min(1).max(MAX_SWINGS),
  first_count: z.enum(FIRST_COUNTS),
  total_us: z.int().min(1).max(MAX_RUN_US),
  /** Last digit of the stopwatch, µs. */
  reading_step_us: z.int().min(1).max(10_000_000),
});

export const KeyedSplitsCapture = z.strictObject({
  kind: z.literal('keyed_splits'),
  swings_per_mark: SwingsPerMark,
  /** Splits since the first press, which is 0 and comes first. */
  mark_us: rising(2, MAX_MARKS),
  reading_step_us: z.int().min(1).max(10_000_000),
});

export const GateCapture = z.strictObject({
  kind: z.literal('gate'),
  /** Blocked and cleared, µs since the first blocked edge; pairs in order, never overlapping. */
  block_us: z
    .array(z.tuple([RunUs, RunUs]))
    .min(1)
    .max(MAX_BLOCKS)
    .refine((b) => b[0]![0] === 0, 'the first blocked edge is at 0')
    .refine(
      (b) => b.every(([on, off], i) => off > on && (i === 0 || on >= b[i - 1]![1])),
      'blocks must follow one another',
    ),
  flag_width_um: z.int().min(1).max(1_000_000).nullable(),
  /** Pivot to the place on the pendulum that breaks the beam. */
  flag_distance_um: z.int().min(1).max(50_000_000).nullable(),
  reading_step_us: z.int().min(1).max(1_000_000),
});

export const Capture = z.discriminatedUnion('kind', [TapCapture, KeyedTotalCapture, KeyedSplitsCapture, GateCapture]);

export const RawRun = z.strictObject({
  format: z.literal(RUN_FORMAT),
  version: z.literal(RUN_VERSION),
  id: Uuid,
  capture: Capture,
  /** The rig and the amplitudes known when the run was sealed; later knowledge is an edit. */
  rig: Rig.nullable(),
  amplitudes: z.array(AmplitudeReading).max(50),
  note: Note,
  made: z.strictObject({
    /** Wall clock at the first mark, or when the reading was entered. */
    wall_ms: WallMs,
    zone_offset_min: z.int().min(-1_000).max(1_000),
    app_version: z.string().max(40),
    device_id: Uuid,
    /** When the safety cautions were last acknowledged on this device that day; null if they were not. */
    cautions_seen_wall_ms: WallMs.nullable(),
  }),
});
export type RawRun = z.infer<typeof RawRun>;
export type Capture = z.infer<typeof Capture>;
export type TapCapture = z.infer<typeof TapCapture>;
export type GateCapture = z.infer<typeof GateCapture>;
export type KeyedTotalCapture = z.infer<typeof KeyedTotalCapture>;
export type KeyedSplitsCapture = z.infer<typeof KeyedSplitsCapture>;
