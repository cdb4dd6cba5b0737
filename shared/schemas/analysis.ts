import { z } from 'zod';
import { Digest, Measured, Uuid } from './common';
import { FLAG_CODES } from './edit';

/**
 * What is computed from a run, its edits and its rig. Never typed in. Two devices that analyse the
 * same inputs with the same method print the same digits.
 */

export const Flag = z.strictObject({
  code: z.enum(FLAG_CODES),
  /** Index into the raw marks the flag is about, or null for the whole run. */
  mark: z.int().min(0).nullable(),
  /** What was seen, for the message: seconds, counts and ratios by name. */
  seen: z.record(z.string(), z.number()),
  /** Edits that would answer it, best first, as kinds of EditChange plus 'keep_flagged'. */
  choices: z.array(
    z.enum(['leave_out_mark', 'insert_gap', 'keep_part', 'reread_as_half_swings', 'set_swings', 'keep_flagged']),
  ),
  /** True once an edit answers it. */
  answered: z.boolean(),
});
export type Flag = z.infer<typeof Flag>;

/** One mark as it stands after the edits. */
export const MarkRow = z.strictObject({
  /** Index into the raw marks or blocks. */
  mark: z.int().min(0),
  /** Swings since the first mark in force; null when left out. */
  swing: z.number().nullable(),
  time_s: z.number(),
  /** Lap to the mark before it that is in force, s. */
  lap_s: z.number().nullable(),
  /** Observed minus calculated, s; null when left out or when nothing could be fitted. */
  residual_s: z.number().nullable(),
});
export type MarkRow = z.infer<typeof MarkRow>;

export const BudgetLine = z.strictObject({
  term: z.enum([
    ...(['timing', 'reading', 'hand', 'clock', 'amplitude', 'decay'] as const),
    ...(['length', 'mass', 'hub', 'air', 'string', 'support'] as const),
  ]),
  type: z.enum(['A', 'B']),
  /** Standard uncertainty it brings to the result, s for T0, m/s² for g. */
  u: z.number().min(0),
  /** Degrees of freedom; null is infinite. */
  dof: z.number().positive().nullable(),
});
export type BudgetLine = z.infer<typeof BudgetLine>;

/** A small effect on T0 that g is corrected for. Finite bob and hub are counted in the reduced length already. */
export const CorrectionLine = z.strictObject({
  term: z.enum(['finite_bob', 'hub', 'string_mass', 'buoyancy', 'added_mass', 'yielding_support']),
  /** Relative change of T0 it makes: above 0 where it lengthens T0, and g would come out low without it. */
  period_rel: z.number(),
  /** What counting it adds to g. */
  g_m_s2: z.number(),
});
export type CorrectionLine = z.infer<typeof CorrectionLine>;

/** A result with what is needed to state it: U = coverage_factor × u covers 95 %. */
export const Result = Measured.extend({
  dof: z.number().positive().nullable(),
  coverage_factor: z.number().positive(),
  expanded_u: z.number().min(0),
});
export type Result = z.infer<typeof Result>;

/**
 * The motion fitted to a run: θ″ = −ω0² sin θ − 2 γ θ′ − β θ′|θ′| − c ω0² sgn θ′ with ω0 = 2π/T0, from rest at
 * the release.
 */
export const Motion = z.strictObject({
  event: z.enum(['pass', 'turn']),
  /** 'averaged' for runs too long to integrate. */
  path: z.enum(['averaged', 'integrated']),
  converged: z.boolean(),
  release_swing: z.number(),
  /** Since the first raw mark; it may lie before it. */
  release_s: z.number(),
  release_deg: Measured,
  gamma_per_s: Measured,
  beta: Measured,
  c: Measured,
  /** How likely each term is to act. `law` is the one that acts alone, if that is more likely than not. */
  chances: z.strictObject({ viscous: z.number(), quadratic: z.number(), dry: z.number() }),
  law: z.enum(['viscous', 'quadratic', 'dry', 'mixed', 'not_known']),
  gate_angle_deg: Measured.nullable(),
});
export type Motion = z.infer<typeof Motion>;

/** Readings of a rig that its kind cannot do without. `length` is the pivot to the bob, or that there is no rig at all. */
export const RIG_READINGS = [
  ...(['length', 'bob_diameter', 'bar_length', 'pivot_offset', 'inner_diameter'] as const),
  ...(['bar_mass', 'bob_mass', 'centre_distance', 'gyration'] as const),
] as const;
export type RigReading = (typeof RIG_READINGS)[number];

export const MISSING = ['marks', 'amplitude', 'end_amplitude', ...RIG_READINGS, 'swings'] as const;

export const Analysis = z.strictObject({
  run_id: Uuid,
  /** Digest of raw run, edits in force and method: the key of this analysis. */
  input_digest: Digest,
  /** Name and version of the method, e.g. 'line-1'. */
  method: z.string().max(40),
  /** Whole swings or parts of one between first and last mark in force; null if not known. */
  swings: z.number().nullable(),
  marks_used: z.int().min(0),
  /** Measured period: mean over the run, not corrected. */
  period_s: Result.nullable(),
  /** Small-amplitude period: corrected for amplitude and its decay. */
  small_period_s: Result.nullable(),
  /** T/T0 over the run, and the amplitudes it was taken over. */
  amplitude: z
    .strictObject({
      ratio: z.number().min(1),
      start_deg: Measured,
      end_deg: Measured,
      /** False when only one amplitude was read and no decay could be allowed for. */
      decay_known: z.boolean(),
    })
    .nullable(),
  /** s.d. of the residuals, s, and their lag-1 correlation. */
  jitter_s: z.number().min(0).nullable(),
  lag1: z.number().min(-1).max(1).nullable(),
  /** Null when none was fitted, or by methods that fit none. */
  motion: Motion.nullable().default(null),
  /** Reduced length: that of the simple pendulum with the same T0, before the corrections that are none of length. */
  length_m: Measured.nullable(),
  g_m_s2: Result.nullable(),
  /** Largest first. Analyses made before there were any have none. */
  corrections: z.array(CorrectionLine).default([]),
  budget: z.array(BudgetLine),
  g_budget: z.array(BudgetLine),
  flags: z.array(Flag),
  marks: z.array(MarkRow),
  /** What is not there and would bring more: in the order a person should give it. */
  missing: z.array(z.enum(MISSING)),
});
export type Analysis = z.infer<typeof Analysis>;
