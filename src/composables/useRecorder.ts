import { onScopeDispose, shallowReadonly, shallowRef } from 'vue';
import { withDeadline } from '@/db/deadline';
import type { LocalStore, RecordingPlan } from '@/db/localStore';
import { discardRecording, sealRecording } from '@/db/recordings';
import type { RunPlace } from '@/db/runs';
import { canonicalText } from '@shared/schemas/canonical';
import { MAX_MARKS } from '@shared/schemas/limits';
import type { RunEvent, TapCapture, TapInput } from '@shared/schemas/run';
import { bounceGate } from '@shared/timing/bounceGate';
import { foldTaps } from '@shared/timing/foldTaps';
import { sealTapRun, type Maker } from '@shared/timing/sealTapRun';
import { steadiness, type Steadiness } from '@shared/timing/steadiness';
import type { RejectedTap, TapEvent, TapRecording } from '@shared/timing/tapRecording';
import { eventWriter } from './eventWriter';

/** How long the pad waits at the planned count for a person who wants to go further. */
export const GRACE_MS = 2_000;

/** armed: no mark yet. grace: the planned count is reached, one more tap goes on. unsaved: sealing failed, try again. */
export type RecorderPhase = 'armed' | 'running' | 'grace' | 'saving' | 'saved' | 'unsaved';

export interface RecorderOptions {
  store: LocalStore;
  /** UUID of the run to be. */
  id: string;
  plan: RecordingPlan;
  place: RunPlace;
  maker: Maker;
  clock: { step_us: number; isolated: boolean };
  /** Thick or wet fingers: asked at every tap. */
  gloved: () => boolean;
  /** The page's clock, the wall's, and the painter's next frame. Default: the browser's. */
  now?: () => number;
  wall?: () => number;
  nextFrame?: (paint: () => void) => void;
}

/** What the pad shows. */
export interface PadView {
  phase: RecorderPhase;
  /** The number the tapper says; −1 before the first. */
  count: number;
  swingsLeft: number | null;
  steadiness: Steadiness | undefined;
  canUndo: boolean;
  canMiss: boolean;
  /** Rows that storage had lost and that were written again at the end. */
  rewritten: number;
}

/**
 * Times one run. A tap is first kept in memory and handed to the disk, then folded, and only in the next
 * frame shown: nothing of Vue stands between the finger and the log. Times come from the caller, who has
 * them from the input event.
 */
export function useRecorder(options: RecorderOptions) {
  const { store, plan } = options;
  const now = options.now ?? (() => performance.now());
  const wall = options.wall ?? (() => Date.now());
  const nextFrame = options.nextFrame ?? ((paint) => void requestAnimationFrame(paint));

  const recording: TapRecording = {
    id: options.id,
    plan,
    started_wall_ms: wall(),
    zone_offset_min: -new Date(wall()).getTimezoneOffset(),
    clock_step_us: options.clock.step_us,
    isolated: options.clock.isolated,
    events: [],
  };
  const writer = eventWriter(store, recording);
  let fold = foldTaps([]);
  let phase: RecorderPhase = 'armed';
  let mayStopItself = true;
  let graceTimer: ReturnType<typeof setTimeout> | undefined;
  let isFrameAsked = false;
  let rewritten = 0;
  let ended: TapCapture['ended'] = 'held';

  const view = shallowRef<PadView>(look());

  type What = TapEvent extends infer Each
    ? Each extends TapEvent
      ? Omit<Each, 'seq' | 'at_ms' | 'wall_ms'>
      : never
    : never;

  function record(at_ms: number, what: What): void {
    const event = {
      seq: recording.events.length + 1,
      at_ms,
      // The wall clock at the instant of the input, however late this runs.
      wall_ms: Math.max(0, Math.round(wall() - (now() - at_ms))),
      ...what,
    } as TapEvent;
    recording.events.push(event);
    writer.write(event);
    fold = foldTaps(recording.events);
  }

  /** @returns whether it became a mark */
  function tap(at_ms: number, input: TapInput): boolean {
    if (!isTaking()) return false;
    const last = fold.marks.at(-1);
    if (last && at_ms * 1000 - last.at_us < bounceGate(fold.marks, options.gloved())) {
      reject(at_ms, 'bounce');
      return false;
    }
    record(at_ms, { kind: 'mark', input });
    if (phase === 'grace') mayStopItself = false;
    settle();
    if (fold.marks.length === MAX_MARKS) void finish('held');
    return true;
  }

  function reject(at_ms: number, why: RejectedTap): void {
    if (isTaking()) record(at_ms, { kind: 'rejected', why });
  }

  function undo(at_ms: number): void {
    if (!isTaking() || !fold.canUndo) return;
    record(at_ms, { kind: 'undo' });
    settle();
  }

  function missed(at_ms: number): void {
    if (!isTaking() || !fold.canMiss) return;
    record(at_ms, { kind: 'missed' });
    settle();
  }

  /** Something that happened to the page. Before the first mark there is nothing it could matter to. */
  function happened(at_ms: number, what: RunEvent['kind']): void {
    if (isTaking() && recording.events.length > 0) record(at_ms, { kind: 'event', what });
  }

  /** From the fold to the phase: begun, at the planned count, back below it. */
  function settle(): void {
    clearTimeout(graceTimer);
    const swings = fold.count * plan.swings_per_mark;
    const isReached = plan.planned_swings !== null && fold.marks.length > 1 && swings >= plan.planned_swings;
    if (fold.marks.length === 0) phase = 'armed';
    else if (isReached && mayStopItself) {
      phase = 'grace';
      graceTimer = setTimeout(() => void finish('planned'), GRACE_MS);
    } else phase = 'running';
    show();
  }

  /** Ends the run: what is on disk is compared with memory, then the run is sealed. */
  async function finish(how: TapCapture['ended'] = 'held'): Promise<void> {
    if (!isTaking() || recording.events.length === 0) return;
    clearTimeout(graceTimer);
    ended = how;
    await seal();
  }

  async function seal(): Promise<void> {
    phase = 'saving';
    show();
    try {
      rewritten += await writer.compare();
      const run = sealTapRun(recording, ended, options.maker);
      if (run) await withDeadline(sealRecording(store, run, options.place));
      else await withDeadline(discardRecording(store, recording.id));
      phase = 'saved';
    } catch {
      phase = 'unsaved';
    }
    show();
  }

  function isTaking(): boolean {
    return phase === 'armed' || phase === 'running' || phase === 'grace';
  }

  function look(): PadView {
    const { planned_swings, swings_per_mark } = plan;
    const swings = Math.max(0, fold.count) * swings_per_mark;
    return {
      phase,
      count: fold.count,
      swingsLeft: planned_swings === null ? null : Math.max(0, planned_swings - swings),
      steadiness: steadiness(fold.marks, swings_per_mark),
      canUndo: fold.canUndo,
      canMiss: fold.canMiss,
      rewritten,
    };
  }

  function show(): void {
    if (isFrameAsked) return;
    isFrameAsked = true;
    nextFrame(() => {
      isFrameAsked = false;
      view.value = look();
    });
  }

  /** The run as text, for a file when storage takes nothing. */
  function asText(): string | null {
    const run = sealTapRun(recording, ended, options.maker);
    return run ? canonicalText(run) : null;
  }

  onScopeDispose(() => clearTimeout(graceTimer));

  return {
    view: shallowReadonly(view),
    isFailing: writer.isFailing,
    hasMark: () => fold.marks.length > 0,
    tap,
    reject,
    undo,
    missed,
    happened,
    finish,
    sealAgain: seal,
    asText,
  };
}
