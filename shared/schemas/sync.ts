import { z } from 'zod';
import { Analysis } from './analysis';
import { Bench, Digest, Uuid, WallMs } from './common';
import { MAX_BATCH_ITEMS, MAX_RAW_BYTES } from './limits';

/** What phone and server say to each other about runs and edits. */

/** Canonical text of a RawRun or RawEdit. The server checks the digest over these very bytes, then reads it. */
const RawText = z.string().min(2).max(MAX_RAW_BYTES);

/** Who made it, as the server knows it. */
export const Author = z.strictObject({
  kind: z.enum(['student', 'volunteer', 'teacher', 'coordinator']),
  id: Uuid,
  /** Nickname or staff name; null where this reader may not see names. */
  name: z.string().nullable(),
});
export type Author = z.infer<typeof Author>;

export const RunItem = z.strictObject({
  type: z.literal('run'),
  id: Uuid,
  digest: Digest,
  raw: RawText,
  /** Where a staff member puts the run; a student's own class and bench are the server's to know. */
  class_id: Uuid.nullable(),
  bench: Bench.nullable(),
});
export const EditItem = z.strictObject({
  type: z.literal('edit'),
  id: Uuid,
  run_id: Uuid,
  digest: Digest,
  raw: RawText,
});

export const SyncRequest = z.strictObject({
  protocol: z.literal(1),
  device_id: Uuid,
  sent_wall_ms: WallMs,
  items: z.array(z.discriminatedUnion('type', [RunItem, EditItem])).max(MAX_BATCH_ITEMS),
});
export type SyncRequest = z.infer<typeof SyncRequest>;
export type SyncItem = SyncRequest['items'][number];

export const Receipt = z.strictObject({
  /** Four letters a person can read out. */
  code: z.string().regex(/^[0-9A-Z]{4}$/),
  received_wall_ms: WallMs,
  server_seq: z.int().min(1),
});
export type Receipt = z.infer<typeof Receipt>;

/**
 * stored: kept now. already: had it, same digest. Both carry a receipt and nothing else does.
 * conflict: this id is held with other bytes. refused: will never be taken as it is. later: try again.
 */
export const Verdict = z.discriminatedUnion('verdict', [
  z.strictObject({
    verdict: z.enum(['stored', 'already']),
    type: z.enum(['run', 'edit']),
    id: Uuid,
    digest: Digest,
    receipt: Receipt,
  }),
  z.strictObject({
    verdict: z.enum(['conflict', 'refused', 'later']),
    type: z.enum(['run', 'edit']),
    id: Uuid,
    digest: Digest,
    code: z.string(),
    message: z.string(),
    fields: z.array(z.strictObject({ path: z.string(), message: z.string() })),
  }),
]);
export type Verdict = z.infer<typeof Verdict>;

export const SyncAnswer = z.strictObject({
  server_epoch: Uuid,
  server_wall_ms: WallMs,
  /** One for every item sent, in the order sent. */
  verdicts: z.array(Verdict),
  /** Analyses of record that were ready in time; the rest come with the feed. */
  analyses: z.array(Analysis),
});
export type SyncAnswer = z.infer<typeof SyncAnswer>;

export const FeedItem = z.discriminatedUnion('type', [
  z.strictObject({
    type: z.literal('run'),
    seq: z.int(),
    id: Uuid,
    digest: Digest,
    raw: RawText,
    class_id: Uuid.nullable(),
    bench: Bench.nullable(),
    author: Author,
    receipt: Receipt,
    /** Device wall clock minus server clock when it arrived, ms. */
    clock_skew_ms: z.int(),
  }),
  z.strictObject({
    type: z.literal('edit'),
    seq: z.int(),
    id: Uuid,
    run_id: Uuid,
    digest: Digest,
    raw: RawText,
    author: Author,
    receipt: Receipt,
  }),
  z.strictObject({ type: z.literal('analysis'), seq: z.int(), analysis: Analysis }),
]);
export type FeedItem = z.infer<typeof FeedItem>;

export const FeedAnswer = z.strictObject({
  server_epoch: Uuid,
  server_wall_ms: WallMs,
  /** Pass it back as `after`. It follows the server's own order, never a device clock. */
  cursor: z.int().min(0),
  more: z.boolean(),
  items: z.array(FeedItem),
});
export type FeedAnswer = z.infer<typeof FeedAnswer>;

/** What GET /api/health says: enough to tell this server from a captive portal, and this life of its database from another. */
export const HealthAnswer = z.strictObject({
  status: z.literal('ok'),
  version: z.string(),
  server_epoch: Uuid,
  server_wall_ms: WallMs,
});
export type HealthAnswer = z.infer<typeof HealthAnswer>;
