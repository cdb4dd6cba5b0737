import { z } from 'zod';
import { MAX_BENCH, MAX_NOTE, MAX_RUN_US } from './limits';

/** Building blocks of every format. Objects are strict everywhere: an unknown field is refused. */

/** In lower case, so that one id has one spelling. */
export const Uuid = z.uuid().lowercase('ids are written in lower case');
export const Digest = z.string().regex(/^[0-9a-f]{64}$/, 'a SHA-256 digest has 64 hexadecimal digits');
/** Milliseconds since 1970, as the device's wall clock said. A fact about the device, never an order. */
export const WallMs = z.int().min(0).max(8_640_000_000_000_000);
/** Microseconds since the first mark of the run. */
export const RunUs = z.int().min(0).max(MAX_RUN_US);
/** Microseconds from the first mark; negative before it. */
export const SignedRunUs = z.int().min(-MAX_RUN_US).max(MAX_RUN_US);
export const Bench = z.int().min(1).max(MAX_BENCH);
/** One line as a person types it: no line breaks, no control signs, nothing that turns the text around it. */
export const Line = z
  .string()
  .trim()
  .regex(/^[^\p{Cc}\p{Cs}\u2028-\u202e\u2066-\u2069]*$/u, 'only letters, digits and signs that can be seen');
export const Note = z.string().trim().max(MAX_NOTE);

/** A number with its standard uncertainty, both in the unit the field's name says. */
export const Measured = z.strictObject({ value: z.number(), u: z.number().min(0) });
export type Measured = z.infer<typeof Measured>;
