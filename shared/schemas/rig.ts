import { z } from 'zod';
import { Note } from './common';

/** How the pendulum was set up this time. Lengths are kept as they were read, in micrometres. */

const LengthUm = z.int().min(1).max(50_000_000);

export const RIG_KINDS = ['string_bob', 'bar', 'bar_bob', 'disc', 'ring', 'other'] as const;
export type RigKind = (typeof RIG_KINDS)[number];

/**
 * One length reading of a string and bob. `to` says where the rule met the bob; the centre is
 * computed from it (`pivotToCentre` in shared/physics/rigLength).
 */
export const LengthReading = z.strictObject({
  to: z.enum(['centre', 'top', 'bottom']),
  um: LengthUm,
});
export type LengthReading = z.infer<typeof LengthReading>;

export const Rig = z.strictObject({
  kind: z.enum(RIG_KINDS),
  /** String and bob, or bar and bob: pivot to bob. Two people's readings, or one. */
  length_readings: z.array(LengthReading).max(8),
  /** Diameter of the bob, µm; needed when a reading went to its top or bottom, unless both were read. */
  bob_diameter_um: LengthUm.nullable(),
  /** Standard uncertainty of one length reading, µm. */
  length_u_um: z.int().min(0).max(1_000_000),
  /** Bar: whole length and the distance from its middle to the pivot. Disc and ring: diameter as bar_length. */
  bar_length_um: LengthUm.nullable(),
  pivot_offset_um: z.int().min(0).max(50_000_000).nullable(),
  label: Note,
});
export type Rig = z.infer<typeof Rig>;

/** Amplitude as it was read: an angle, or a sideways distance of the bob's centre and the length it hangs at. */
export const AmplitudeReading = z.strictObject({
  /** Swings after the first mark; 0 is the start. */
  swing: z.number().min(0).max(100_000),
  as_read: z.discriminatedUnion('form', [
    z.strictObject({ form: z.literal('angle'), mdeg: z.int().min(1).max(179_000) }),
    z.strictObject({ form: z.literal('sideways'), sideways_um: LengthUm, length_um: LengthUm }),
  ]),
  /** Standard uncertainty of the reading: millidegrees for an angle, µm for a distance. */
  u: z.int().min(0).max(1_000_000),
});
export type AmplitudeReading = z.infer<typeof AmplitudeReading>;
