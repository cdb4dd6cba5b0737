import { randomUUID } from 'node:crypto';
import { canonicalText, digestOf } from '@shared/schemas/canonical';
import { EDIT_FORMAT, EDIT_VERSION, type EditChange } from '@shared/schemas/edit';
import { RUN_FORMAT, RUN_VERSION, type RawRun, type TapCapture } from '@shared/schemas/run';
import type { SyncItem, SyncRequest } from '@shared/schemas/sync';

export type RunItem = Extract<SyncItem, { type: 'run' }>;
export type EditItem = Extract<SyncItem, { type: 'edit' }>;

/** Ten swings of 2.007 s, each mark a little off; state only what matters. */
export function rawRun(changes: Partial<RawRun> = {}): RawRun {
  return {
    format: RUN_FORMAT,
    version: RUN_VERSION,
    id: randomUUID(),
    capture: tapCapture(),
    rig: null,
    amplitudes: [
      { swing: 0, as_read: { form: 'angle', mdeg: 10_000 }, u: 500 },
      { swing: 10, as_read: { form: 'angle', mdeg: 9_500 }, u: 500 },
    ],
    note: '',
    made: {
      wall_ms: 1_760_000_000_000,
      zone_offset_min: 0,
      app_version: '0.1.0',
      cautions_seen_wall_ms: null,
      device_id: '0199d000-0000-7000-8000-000000000001',
    },
    ...changes,
  };
}

export function tapCapture(changes: Partial<TapCapture> = {}): TapCapture {
  return {
    kind: 'tap',
    swings_per_mark: 1,
    planned_swings: 10,
    mark_us: Array.from({ length: 11 }, (_, i) => i * 2_007_000 + ((i * 7_919) % 31) * (i > 0 ? 1_000 : 0)),
    missed: [],
    rejected: [],
    inputs: ['touch'],
    clock: { step_us: 100, isolated: false, anchors: [] },
    events: [],
    ended: 'planned',
    ...changes,
  };
}

export function runItem(run: RawRun = rawRun(), place: Partial<RunItem> = {}): RunItem {
  const raw = canonicalText(run);
  return { type: 'run', id: run.id, digest: digestOf(raw), raw, class_id: null, bench: null, ...place };
}

export function editItem(run_id: string, change: EditChange, made_seq = 1, reason = ''): EditItem {
  const id = randomUUID();
  const raw = canonicalText({
    format: EDIT_FORMAT,
    version: EDIT_VERSION,
    id,
    run_id,
    made_seq,
    made_wall_ms: 1_760_000_100_000,
    reason,
    change,
  });
  return { type: 'edit', id, run_id, digest: digestOf(raw), raw };
}

export function batch(items: unknown[], changes: Partial<SyncRequest> = {}) {
  return {
    protocol: 1,
    device_id: '0199d000-0000-7000-8000-000000000001',
    sent_wall_ms: Date.now(),
    items,
    ...changes,
  };
}
