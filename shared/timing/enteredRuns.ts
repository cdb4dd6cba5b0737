import { RUN_FORMAT, RUN_VERSION } from '../schemas/formats';
import type { AmplitudeReading, Rig } from '../schemas/rig';
import type { Capture, GateCapture, KeyedTotalCapture, RawRun } from '../schemas/run';
import type { Maker } from './sealTapRun';

/** Everything about an entered run that is not its times. Id and clock are the caller's. */
export interface RunContext extends Maker {
  id: string;
  /** Wall clock when the reading was entered. */
  wall_ms: number;
  zone_offset_min: number;
  rig: Rig | null;
  amplitudes: AmplitudeReading[];
  note: string;
}

type KeyedSplits = Extract<Capture, { kind: 'keyed_splits' }>;

/** A run from one stopwatch reading for a number of swings. */
export function keyedTotalRun(reading: Omit<KeyedTotalCapture, 'kind'>, context: RunContext): RawRun {
  return rawRun({ kind: 'keyed_total', ...reading }, context);
}

/** A run from a list of stopwatch splits (`parseSplits`). */
export function keyedSplitsRun(splits: Omit<KeyedSplits, 'kind'>, context: RunContext): RawRun {
  return rawRun({ kind: 'keyed_splits', ...splits }, context);
}

/** A run from the blocked and cleared edges of a gate (`gateBlocks`). */
export function gateRawRun(blocks: Omit<GateCapture, 'kind'>, context: RunContext): RawRun {
  return rawRun({ kind: 'gate', ...blocks }, context);
}

function rawRun(capture: Capture, { id, rig, amplitudes, note, ...made }: RunContext): RawRun {
  return { format: RUN_FORMAT, version: RUN_VERSION, id, capture, rig, amplitudes, note: note.trim(), made };
}
