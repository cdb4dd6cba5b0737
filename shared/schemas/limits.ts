/**
 * The limits both sides keep, each with its unit. The server refuses what is over them; the phone
 * says so before anything is sent. Nothing else in the code repeats these numbers.
 */

/** Marks in one tapped run or splits in one keyed run. */
export const MAX_MARKS = 2_000;
/** Block/unblock pairs in one gate run. */
export const MAX_BLOCKS = 5_000;
/** Longest run, µs: twelve hours. */
export const MAX_RUN_US = 12 * 3600 * 1_000_000;
/** Canonical text of one raw run or edit, bytes. */
export const MAX_RAW_BYTES = 200_000;
/** Items in one sync batch. */
export const MAX_BATCH_ITEMS = 50;
/** Body of one sync request, bytes. */
export const MAX_SYNC_BYTES = 1_000_000;
/** Body of every other request, bytes. */
export const MAX_BODY_BYTES = 32_000;
/** Runs one account may hand in per day. */
export const MAX_RUNS_PER_DAY = 2_000;
/** Edits one account may hand in per day. */
export const MAX_EDITS_PER_DAY = 10_000;
/** Benches a class may number. */
export const MAX_BENCH = 40;
/** Characters in a note or a reason. */
export const MAX_NOTE = 500;
/** Swings a plan or a keyed reading may count. */
export const MAX_SWINGS = 1_000;
/** A mass of a rig, mg: 100 kg. */
export const MAX_MASS_MG = 100_000_000;
/** A hub's or clamp's moment of inertia, g mm²: 10 kg m². */
export const MAX_INERTIA_G_MM2 = 10_000_000_000;
/** Sideways stiffness of a support, N/m: below the least it is no support. */
export const LEAST_STIFFNESS = 100;
export const MOST_STIFFNESS = 1_000_000_000;
