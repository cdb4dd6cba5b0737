import { v7 as uuidv7 } from 'uuid';
import type { Me } from '@shared/schemas/accounts';
import { canonicalText, digestOf } from '@shared/schemas/canonical';
import type { EditChange, RawEdit } from '@shared/schemas/edit';
import type { RawRun } from '@shared/schemas/run';
import type { FeedItem, SyncItem, Verdict } from '@shared/schemas/sync';

/** Things as phone and server exchange them; state only what a test is about. */

export const EPOCH = '018f0000-0000-7000-8000-00000000e001';
export const OTHER_EPOCH = '018f0000-0000-7000-8000-00000000e002';
export const DEVICE = '018f0000-0000-4000-8000-00000000d001';
export const CLASS_ID = '018f0000-0000-7000-8000-00000000c001';

export const student = (n: number): Me => ({
  kind: 'student',
  id: `018f0000-0000-7000-8000-0000000a000${n}`,
  nickname: `Bob ${n}`,
  bench: n,
  class: { id: CLASS_ID, name: '11B', teacher_word: 'plumb' },
});

export const rawRun = (over: Partial<RawRun> = {}): RawRun => ({
  format: 'swaymark-run',
  version: 1,
  id: uuidv7(),
  capture: { kind: 'keyed_total', counted_to: 20, first_count: 'zero', total_us: 40_120_000, reading_step_us: 10_000 },
  rig: null,
  amplitudes: [],
  note: '',
  made: {
    wall_ms: 1_750_000_000_000,
    zone_offset_min: 60,
    app_version: '0.1.0',
    device_id: DEVICE,
    cautions_seen_wall_ms: null,
  },
  ...over,
});

export const rawEdit = (run_id: string, change: EditChange): Omit<RawEdit, 'made_seq'> => ({
  format: 'swaymark-edit',
  version: 1,
  id: uuidv7(),
  run_id,
  made_wall_ms: 1_750_000_100_000,
  reason: 'counted again',
  change,
});

let seq = 0;
export const receipt = () => ({ code: 'K7QM', received_wall_ms: 1_750_000_200_000, server_seq: ++seq });

export const stored = ({ type, id, digest }: Pick<SyncItem, 'type' | 'id' | 'digest'>): Verdict => ({
  verdict: 'stored',
  type,
  id,
  digest,
  receipt: receipt(),
});

export const turnedDown = (
  verdict: 'conflict' | 'refused' | 'later',
  item: Pick<SyncItem, 'type' | 'id' | 'digest'>,
): Verdict => ({
  verdict,
  type: item.type,
  id: item.id,
  digest: item.digest,
  code: 'not_yours',
  message: 'This run belongs to another bench.',
  fields: [],
});

export const syncAnswer = (verdicts: Verdict[], server_epoch = EPOCH) => ({
  server_epoch,
  server_wall_ms: 1_750_000_200_000,
  verdicts,
  analyses: [],
});

export const feedAnswer = (items: FeedItem[], cursor: number, over: object = {}) => ({
  server_epoch: EPOCH,
  server_wall_ms: 1_750_000_200_000,
  cursor,
  more: false,
  items,
  ...over,
});

/** A page of the feed as it stands once it was read. */
export const feedPage = (items: FeedItem[], cursor: number, over: object = {}) => ({
  ...feedAnswer(items, cursor),
  reader: 'this version',
  not_understood: [] as number[],
  ...over,
});

export function feedRun(run: RawRun): Extract<FeedItem, { type: 'run' }> {
  const raw = canonicalText(run);
  const { server_seq, ...rest } = receipt();
  return {
    type: 'run',
    seq: server_seq,
    id: run.id,
    digest: digestOf(raw),
    raw,
    class_id: CLASS_ID,
    bench: 3,
    author: { kind: 'student', id: '018f0000-0000-7000-8000-0000000a0003', name: 'Bob 3' },
    receipt: { ...rest, server_seq },
    clock_skew_ms: 12,
  };
}
