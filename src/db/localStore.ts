import { Dexie, type EntityTable, type Table } from 'dexie';
import type { AmplitudeReading, Rig } from '@shared/schemas/rig';
import type { Analysis } from '@shared/schemas/analysis';
import type { Author, Receipt } from '@shared/schemas/sync';
import type { RunEvent, TapInput } from '@shared/schemas/run';
import type { BoardPoint, ClassView, Me } from '@shared/schemas/accounts';

/**
 * What one account keeps on this device. Each account has a store of its own, so people who share a
 * phone never see or send each other's runs. Rows here are the only copy of a run until a receipt
 * with its id and digest came back: nothing else may mark one as received.
 */

/** What the person chose before timing. */
export interface RecordingPlan {
  swings_per_mark: number;
  planned_swings: number | null;
  rig: Rig | null;
  amplitudes: AmplitudeReading[];
}

/** A tap run being timed, or cut short. `open` until it is sealed into a run or discarded. */
export interface RecordingRow {
  id: string;
  state: 'open' | 'sealed' | 'discarded';
  plan: RecordingPlan;
  started_wall_ms: number;
  zone_offset_min: number;
  clock_step_us: number;
  isolated: boolean;
}

/** One thing that happened on the pad, written as it happens. `seq` counts from 1 without holes. */
export type RecordingEventRow = {
  recording_id: string;
  seq: number;
  /** event.timeStamp, ms on this page's monotonic clock. */
  at_ms: number;
  wall_ms: number;
} & (
  | { kind: 'mark'; input: TapInput }
  | { kind: 'undo' }
  | { kind: 'missed' }
  | { kind: 'rejected'; why: 'bounce' | 'palm' | 'key_repeat' | 'untrusted' }
  | { kind: 'event'; what: RunEvent['kind'] }
);

/** waiting: no receipt yet. received: the receipt is here. refused: the server gave a reason and will not take it. */
export type SendState = 'waiting' | 'received' | 'refused';

export interface SendInfo {
  state: SendState;
  /** Order in which this device made things; 0 for what came from the server. */
  created_seq: number;
  receipt: Receipt | null;
  refusal: { code: string; message: string } | null;
  author: Author | null;
  /** mine: made on this device. feed: came from the server. */
  origin: 'mine' | 'feed';
}

export interface RunRow extends SendInfo {
  id: string;
  digest: string;
  /** Canonical text, byte for byte. */
  raw: string;
  class_id: string | null;
  bench: number | null;
  made_wall_ms: number;
  clock_skew_ms: number | null;
}

export interface EditRow extends SendInfo {
  id: string;
  run_id: string;
  digest: string;
  raw: string;
}

/** The server's analysis of record. */
export interface AnalysisRow {
  run_id: string;
  input_digest: string;
  server_seq: number;
  analysis: Analysis;
}

export interface MetaRow {
  key: string;
  content: unknown;
}

export class LocalStore extends Dexie {
  recordings!: EntityTable<RecordingRow, 'id'>;
  recordingEvents!: Table<RecordingEventRow, [string, number]>;
  runs!: EntityTable<RunRow, 'id'>;
  edits!: EntityTable<EditRow, 'id'>;
  analyses!: Table<AnalysisRow, [string, string]>;
  classes!: EntityTable<ClassView, 'id'>;
  boardPoints!: Table<BoardPoint & { pass: string }, [string, string]>;
  /** cursor, server_epoch, created_seq, last rig, last contact … */
  meta!: EntityTable<MetaRow, 'key'>;

  /**
   * @param owner       whose store: see {@link ownerKey}
   * @param durability  relaxed: the system has it when a write resolves; strict: the disk has it
   */
  constructor(
    readonly owner: string,
    durability: 'relaxed' | 'strict' = 'relaxed',
  ) {
    super(`swaymark-${owner}`, { chromeTransactionDurability: durability });
    this.version(1).stores({
      recordings: 'id, state',
      recordingEvents: '[recording_id+seq], recording_id',
      runs: 'id, state, class_id, created_seq',
      edits: 'id, run_id, state, created_seq',
      analyses: '[run_id+input_digest], run_id',
      classes: 'id',
      boardPoints: '[pass+run_id], pass',
      meta: 'key',
    });
  }
}

const strictTwins = new WeakMap<LocalStore, LocalStore>();

/**
 * A second connection to the same store whose writes resolve only once they are flushed to disk:
 * for sealing, where a tap's few milliseconds do not matter and power loss does.
 */
export function strictly(store: LocalStore): LocalStore {
  const twin = strictTwins.get(store) ?? new LocalStore(store.owner, 'strict');
  strictTwins.set(store, twin).set(twin, twin);
  return twin;
}

/** Closes both connections. */
export function closeStore(store: LocalStore): void {
  strictTwins.get(store)?.close();
  strictTwins.delete(store);
  store.close();
}

/** Name of an account's store: 'guest' while nobody is signed in. */
export function ownerKey(me: Me | null): string {
  return me ? `${me.kind}-${me.id}` : 'guest';
}
