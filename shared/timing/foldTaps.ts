import { MAX_MARKS, MAX_RUN_US } from '../schemas/limits';
import type { TapInput } from '../schemas/run';
import { MAX_MISSED, MAX_UNDO, type RejectedTap, type TapEvent } from './tapRecording';

/** A mark in force. `missed` passes went by uncounted just before it. */
export interface FoldedMark {
  at_us: number;
  wall_ms: number;
  input: TapInput;
  missed: number;
}

/** What a pad's log comes to so far. Times are µs on the page's clock, not yet from the first mark. */
export interface TapFold {
  marks: FoldedMark[];
  rejected: { why: RejectedTap | 'undone'; at_us: number }[];
  /** Marks since the first one, missed ones counted: the number the tapper says. −1 before it. */
  count: number;
  canUndo: boolean;
  canMiss: boolean;
}

/**
 * Reads the log in its order. An undo takes back the last mark, or the last "missed one", at most five
 * in a row. A mark that is not later than the one before it is rejected, never moved.
 *
 * @param events  the log so far, any length
 * @returns       the marks in force and what was rejected
 */
export function foldTaps(events: readonly TapEvent[]): TapFold {
  const marks: FoldedMark[] = [];
  const rejected: TapFold['rejected'] = [];
  let missed = 0;
  let missedInAll = 0;
  let undosInRow = 0;
  const mayMiss = () => marks.length > 0 && missed < MAX_MISSED && missedInAll < MAX_MISSED_IN_ALL;

  for (const event of events) {
    const at_us = Math.round(event.at_ms * 1000);
    if (event.kind === 'mark') {
      const [first, last] = [marks[0], marks.at(-1)];
      if (last && at_us <= last.at_us) rejected.push({ why: 'bounce', at_us });
      else if (!first || (at_us - first.at_us <= MAX_RUN_US && marks.length < MAX_MARKS)) {
        marks.push({ at_us, wall_ms: event.wall_ms, input: event.input, missed });
        missed = 0;
        undosInRow = 0;
      }
    } else if (event.kind === 'undo' && undosInRow < MAX_UNDO) {
      if (missed > 0) {
        missed -= 1;
        missedInAll -= 1;
        undosInRow += 1;
      } else {
        const taken = marks.pop();
        if (!taken) continue;
        missed = taken.missed;
        undosInRow += 1;
        rejected.push({ why: 'undone', at_us: taken.at_us });
      }
    } else if (event.kind === 'missed' && mayMiss()) {
      missed += 1;
      missedInAll += 1;
    } else if (event.kind === 'rejected') {
      rejected.push({ why: event.why, at_us });
    }
  }
  return {
    marks,
    rejected,
    count: marks.length - 1 + missedInAll,
    canUndo: marks.length > 0 && undosInRow < MAX_UNDO,
    canMiss: mayMiss(),
  };
}

/** A run may say so many times that one was missed; the schema holds as many gaps. */
const MAX_MISSED_IN_ALL = 200;
