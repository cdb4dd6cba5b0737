import type { AmplitudeReading, Rig } from '../schemas/rig';
import type { RunEvent, TapInput } from '../schemas/run';

/** What happened on the pad, in the order it happened: the log a tap run is made from. */

/** A contact that was seen and not taken as a mark. */
export type RejectedTap = 'bounce' | 'palm' | 'key_repeat' | 'untrusted';

/** One thing that happened. `seq` counts from 1 without holes. */
export type TapEvent = {
  seq: number;
  /** The browser's own time of the input (event.timeStamp), ms on this page's monotonic clock. */
  at_ms: number;
  /** What the wall clock said at that same instant, ms since 1970. */
  wall_ms: number;
} & (
  | { kind: 'mark'; input: TapInput }
  | { kind: 'undo' }
  | { kind: 'missed' }
  | { kind: 'rejected'; why: RejectedTap }
  | { kind: 'event'; what: RunEvent['kind'] }
);

/** A tap run as it was timed, with what was chosen before it. */
export interface TapRecording {
  id: string;
  plan: {
    swings_per_mark: number;
    planned_swings: number | null;
    rig: Rig | null;
    amplitudes: AmplitudeReading[];
  };
  started_wall_ms: number;
  /** Minutes east of Greenwich. */
  zone_offset_min: number;
  clock_step_us: number;
  isolated: boolean;
  events: TapEvent[];
}

/** How many times in a row the last pass can be taken back. */
export const MAX_UNDO = 5;
/** How many passes in a row can be called missed. */
export const MAX_MISSED = 50;
