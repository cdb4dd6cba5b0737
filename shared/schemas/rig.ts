import { z } from 'zod';
import { Note } from './common';
import { LEAST_STIFFNESS, MAX_INERTIA_G_MM2, MAX_MASS_MG, MOST_STIFFNESS } from './limits';

/**
 * How the pendulum was set up this time. Readings are kept as they were read: lengths in micrometres, masses in
 * milligrams. Fields marked `.optional()` came later and are left out, not null, while they are not given.
 */

const LengthUm = z.int().min(1).max(50_000_000);
const MassMg = z.int().min(1).max(MAX_MASS_MG);

export const RIG_KINDS = ['string_bob', 'bar', 'bar_bob', 'disc', 'ring', 'other'] as const;
export type RigKind = (typeof RIG_KINDS)[number];

/** A solid ball unless told; a disc lies flat in the plane of the swing. */
export const BOB_SHAPES = ['ball', 'hollow_ball', 'disc'] as const;
export type BobShape = (typeof BOB_SHAPES)[number];

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
  bob_mass_mg: MassMg.optional(),
  bob_shape: z.enum(BOB_SHAPES).optional(),
  string_mass_mg: MassMg.optional(),
  /** Of the bar, disc, ring or other body. */
  bar_mass_mg: MassMg.optional(),
  /** Standard uncertainty of one weighing, mg. */
  mass_u_mg: z.int().min(0).max(1_000_000).optional(),
  /** Of the bar, in the plane of the swing. */
  bar_width_um: LengthUm.optional(),
  /** Of the ring; with no offset given it hangs from its inner edge. */
  inner_diameter_um: LengthUm.optional(),
  /** Other: pivot to centre of mass, and radius of gyration about the centre of mass. */
  centre_distance_um: LengthUm.optional(),
  gyration_um: z.int().min(0).max(50_000_000).optional(),
  /** Of what turns with the pivot and is centred on it (clamp, bearing, encoder disc), with its standard uncertainty. */
  hub_inertia_g_mm2: z.int().min(0).max(MAX_INERTIA_G_MM2).optional(),
  hub_inertia_u_g_mm2: z.int().min(0).max(MAX_INERTIA_G_MM2).optional(),
  /** Sideways force on the support that moves it by a metre. */
  support_stiffness_n_per_m: z.int().min(LEAST_STIFFNESS).max(MOST_STIFFNESS).optional(),
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
