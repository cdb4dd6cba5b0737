import { z } from 'zod';
import { Note, Uuid, WallMs } from './common';
import { EDIT_FORMAT, EDIT_VERSION } from './formats';
import { MAX_MARKS, MAX_SWINGS } from './limits';
import { AmplitudeReading, Rig } from './rig';

/**
 * An edit lies over a run and never touches it. Edits are only ever added; `withdraw` takes an
 * earlier one out of force. Mark numbers are indexes into the raw marks (or blocks), from 0.
 * The author is not in here: the server writes down who was signed in.
 */

export { EDIT_FORMAT, EDIT_VERSION };

/** What the checker can notice. */
export const FLAG_CODES = [
  'double',
  'missed',
  'half_swings',
  'count_from_one',
  'late_first_mark',
  'outlier',
  'clock_gap',
  'cut_short',
  'chatter',
  'off_centre',
  'pause',
  'drift',
  'round_numbers',
  'implausible',
] as const;
export type FlagCode = (typeof FLAG_CODES)[number];

const Mark = z.int().min(0).max(MAX_MARKS);

export const EditChange = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('leave_out_mark'), mark: Mark }),
  /** `count` swings-per-mark steps are missing before this mark. Never a time. */
  z.strictObject({ kind: z.literal('insert_gap'), before_mark: Mark, count: z.int().min(1).max(50) }),
  /** Only the marks from one to another count, both included: the rest was another swing, or timed across a pause. */
  z.strictObject({ kind: z.literal('keep_part'), from_mark: Mark, to_mark: Mark }),
  z.strictObject({ kind: z.literal('reread_as_half_swings') }),
  /** Sets the number of swings between first and last mark, or of a keyed total. */
  z.strictObject({ kind: z.literal('set_swings'), swings: z.number().min(0.5).max(MAX_SWINGS) }),
  z.strictObject({ kind: z.literal('set_rig'), rig: Rig }),
  z.strictObject({ kind: z.literal('set_amplitudes'), amplitudes: z.array(AmplitudeReading).max(50) }),
  z.strictObject({ kind: z.literal('note'), text: Note.min(1) }),
  /** The flag was looked at and the marks stay as they are. */
  z.strictObject({ kind: z.literal('keep_flagged'), flag: z.enum(FLAG_CODES), mark: Mark.nullable() }),
  /** The run does not count: not on the Board, not among repeats. Its figures stay as they are. */
  z.strictObject({ kind: z.literal('set_aside') }),
  z.strictObject({ kind: z.literal('withdraw'), edit_id: Uuid }),
]);
export type EditChange = z.infer<typeof EditChange>;
export type EditKind = EditChange['kind'];

export const RawEdit = z
  .strictObject({
    format: z.literal(EDIT_FORMAT),
    version: z.literal(EDIT_VERSION),
    id: Uuid,
    run_id: Uuid,
    /** Order among one device's edits of one run: 1, 2, 3 … */
    made_seq: z.int().min(1).max(1_000_000),
    made_wall_ms: WallMs,
    reason: Note,
    change: EditChange,
  })
  .refine(({ change, reason }) => change.kind !== 'set_aside' || reason !== '', {
    path: ['reason'],
    message: 'setting a run aside needs a reason',
  });
export type RawEdit = z.infer<typeof RawEdit>;
