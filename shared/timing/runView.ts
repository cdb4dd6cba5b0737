import type { FlagCode } from '../schemas/edit';
import type { AmplitudeReading, Rig } from '../schemas/rig';
import type { Capture } from '../schemas/run';

/** One recorded instant as it stands after the edits. */
export interface ViewMark {
  /** Index into the raw marks or blocks. */
  mark: number;
  /** s since the first raw mark. */
  time: number;
  /** Swings since the first mark in force; null when left out. */
  swing: number | null;
  leftOut: boolean;
  /** Marks missing before this one, as told on the pad or by an edit. */
  gap: number;
  /** s the beam of a gate was broken; null for hands. */
  blockedTime: number | null;
  /** Of a gate's block that chatter broke apart: the piece that stands for this one. Null once somebody left it out. */
  partOf: number | null;
}

/** A run with its edits laid over it: what is in force now. Times in s, swings counted there and back. */
export interface RunView {
  runId: string;
  capture: Capture;
  /** Every raw mark in order; empty for a keyed total. */
  marks: ViewMark[];
  /** Swings from one mark to the next. */
  swingsPerMark: number;
  /** Swings between first and last mark in force, or of a keyed total; null if not known. */
  swings: number | null;
  /** s between first and last mark in force, or the keyed total. */
  duration: number;
  /** Last digit of the clock or stopwatch, s. */
  readingStep: number;
  rig: Rig | null;
  /** Counted, as the marks are, from the first mark in force. */
  amplitudes: ViewAmplitude[];
  notes: string[];
  /** Flags somebody looked at and left as they are. */
  kept: { flag: FlagCode; mark: number | null }[];
  /** The edit by which the run does not count, and why; null while it counts. */
  setAside: { editId: string; reason: string } | null;
}

/** An amplitude reading whose swing may lie before the first mark in force. */
export type ViewAmplitude = Omit<AmplitudeReading, 'swing'> & { swing: number };
