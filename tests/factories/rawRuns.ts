import { canonicalText, digestOf } from '@shared/schemas/canonical';
import type { EditChange, RawEdit } from '@shared/schemas/edit';
import type { AmplitudeReading, Rig } from '@shared/schemas/rig';
import type { Capture, GateCapture, KeyedTotalCapture, RawRun, TapCapture } from '@shared/schemas/run';
import type { Sealed } from '@shared/analysis/analyseRun';

/** Raw runs and edits that keep the schema, stating only what a test is about. */

type KeyedSplitsCapture = Extract<Capture, { kind: 'keyed_splits' }>;
type RunParts = Partial<Omit<RawRun, 'capture'>>;

/** A UUIDv7 that ends in a number. */
export function uuid(n: number): string {
  return `01900000-0000-7000-8000-${n.toString(16).padStart(12, '0')}`;
}

/** Taps once a swing; times in s. @example rawTapRun({ times: [0, 2, 4] }) */
export function rawTapRun({
  times = evenTimes(21, 2),
  capture = {},
  ...run
}: RunParts & { times?: number[]; capture?: Partial<TapCapture> } = {}): RawRun {
  return rawRun(
    {
      kind: 'tap',
      swings_per_mark: 1,
      planned_swings: null,
      mark_us: times.map((t) => Math.round((t - times[0]!) * 1e6)),
      missed: [],
      rejected: [],
      inputs: ['touch'],
      clock: { step_us: 100, isolated: true, anchors: [] },
      events: [],
      ended: 'planned',
      ...capture,
    },
    run,
  );
}

/** One stopwatch reading; total in s. @example rawKeyedRun({ counted_to: 20, total: 40.12 }) */
export function rawKeyedRun({
  total = 40.12,
  counted_to = 20,
  first_count = 'zero',
  ...run
}: RunParts & { total?: number } & Partial<Pick<KeyedTotalCapture, 'counted_to' | 'first_count'>> = {}): RawRun {
  const total_us = Math.round(total * 1e6);
  return rawRun({ kind: 'keyed_total', counted_to, first_count, total_us, reading_step_us: 10_000 }, run);
}

/** Stopwatch splits; times in s, the first is the first press. */
export function rawSplitsRun({
  times = evenTimes(11, 2),
  capture = {},
  ...run
}: RunParts & { times?: number[]; capture?: Partial<KeyedSplitsCapture> } = {}): RawRun {
  const mark_us = times.map((t) => Math.round((t - times[0]!) * 1e6));
  return rawRun({ kind: 'keyed_splits', swings_per_mark: 1, mark_us, reading_step_us: 10_000, ...capture }, run);
}

/** Gate blocks; blocked and cleared in s. Every second block is one swing. */
export function rawGateRun({
  blocks = evenTimes(21, 1).map((t) => [t, t + 0.02] as [number, number]),
  capture = {},
  ...run
}: RunParts & { blocks?: [number, number][]; capture?: Partial<GateCapture> } = {}): RawRun {
  const start = blocks[0]![0];
  const us = (t: number) => Math.round((t - start) * 1e6);
  const block_us = blocks.map(([on, off]): [number, number] => [us(on), us(off)]);
  const flag = { flag_width_um: null, flag_distance_um: null };
  return rawRun({ kind: 'gate', block_us, ...flag, reading_step_us: 1, ...capture }, run);
}

/** An edit of a run. @example rawEdit(run, { kind: 'leave_out_mark', mark: 3 }) */
export function rawEdit(run: Pick<RawRun, 'id'>, change: EditChange, parts: Partial<RawEdit> = {}): RawEdit {
  const made_seq = parts.made_seq ?? 1;
  return {
    format: 'swaymark-edit',
    version: 1,
    id: uuid(0xed000 + made_seq),
    run_id: run.id,
    made_seq,
    made_wall_ms: 1_750_000_100_000 + made_seq,
    reason: change.kind === 'set_aside' ? 'the stand moved' : '',
    change,
    ...parts,
  };
}

/** Several edits of a run, numbered in their order. */
export function rawEdits(run: Pick<RawRun, 'id'>, ...changes: EditChange[]): RawEdit[] {
  return changes.map((change, i) => rawEdit(run, change, { made_seq: i + 1 }));
}

export function sealed<T>(content: T): Sealed<T> {
  return { content, digest: digestOf(canonicalText(content)) };
}

/** Amplitude read as an angle, in degrees. */
export function angleReading(swing: number, angle: number, u = 1): AmplitudeReading {
  return { swing, as_read: { form: 'angle', mdeg: Math.round(angle * 1000) }, u: Math.round(u * 1000) };
}

/** String and bob, 1 m to the centre of the bob. */
export function stringRig(parts: Partial<Rig> = {}): Rig {
  return {
    kind: 'string_bob',
    length_readings: [{ to: 'centre', um: 1_000_000 }],
    bob_diameter_um: null,
    length_u_um: 1_000,
    bar_length_um: null,
    pivot_offset_um: null,
    label: '',
    ...parts,
  };
}

/** n instants, one every `lap` s. */
export function evenTimes(n: number, lap: number): number[] {
  return Array.from({ length: n }, (_, i) => i * lap);
}

function rawRun(capture: Capture, parts: RunParts): RawRun {
  return {
    format: 'swaymark-run',
    version: 1,
    id: uuid(1),
    capture,
    rig: null,
    amplitudes: [],
    note: '',
    made: {
      wall_ms: 1_750_000_000_000,
      zone_offset_min: 60,
      app_version: '0.1.0',
      device_id: uuid(0xde1ce),
      cautions_seen_wall_ms: null,
    },
    ...parts,
  };
}
