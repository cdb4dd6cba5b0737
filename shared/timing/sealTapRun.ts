import { MAX_RUN_US } from '../schemas/limits';
import type { RawRun, TapCapture } from '../schemas/run';
import { INPUTS, RUN_FORMAT, RUN_VERSION } from '../schemas/formats';
import { foldTaps, type FoldedMark } from './foldTaps';
import type { TapEvent, TapRecording } from './tapRecording';

/** The wall clock moving this much against the page's clock between neighbours means sleep or a changed clock. */
export const CLOCK_GAP_MS = 50;
/** What a run keeps at most, so that its text stays well below MAX_RAW_BYTES. The log itself keeps all. */
const MOST_REJECTED = 1_000;
const MOST_EVENTS = 500;
const MOST_GAP_ANCHORS = 100;

/** Where and with what a run was made, and whether the cautions were read before. */
export interface Maker {
  app_version: string;
  device_id: string;
  cautions_seen_wall_ms: number | null;
}

/**
 * Folds a pad's log into the raw run, which never changes afterwards. Nothing is made up: marks are the
 * browser's own times as whole µs since the first mark in force, a missed pass is a gap, and where the
 * clocks parted a clock_gap stands.
 *
 * @param recording  the log, in the order of seq
 * @param ended      how the run came to its end
 * @param maker      program version and device
 * @returns          a run that keeps the schema, or undefined when no mark is in force
 */
export function sealTapRun(recording: TapRecording, ended: TapCapture['ended'], maker: Maker): RawRun | undefined {
  const log = [...recording.events].sort((a, b) => a.seq - b.seq);
  const { marks, rejected } = foldTaps(log);
  const first = marks[0];
  if (!first) return undefined;

  const fromFirst = (at_us: number) => at_us - first.at_us;
  const inReach = <T extends { at_us: number }>(things: T[]) =>
    things.filter(({ at_us }) => Math.abs(at_us) <= MAX_RUN_US);
  const gaps = clockGaps(log);

  return {
    format: RUN_FORMAT,
    version: RUN_VERSION,
    id: recording.id,
    capture: {
      kind: 'tap',
      swings_per_mark: recording.plan.swings_per_mark,
      planned_swings: recording.plan.planned_swings,
      mark_us: marks.map((mark) => fromFirst(mark.at_us)),
      missed: marks.flatMap(({ missed }, i) => (missed > 0 ? [{ before_mark: i, count: missed }] : [])),
      rejected: inReach(rejected.map(({ why, at_us }) => ({ why, at_us: fromFirst(at_us) }))).slice(0, MOST_REJECTED),
      inputs: INPUTS.filter((input) => marks.some((mark) => mark.input === input)),
      clock: {
        step_us: recording.clock_step_us,
        isolated: recording.isolated,
        anchors: inReach(
          anchorInstants(marks, gaps).map(({ at_us, wall_ms }) => ({ at_us: fromFirst(at_us), wall_ms })),
        ),
      },
      events: inReach(
        lifecycle(log, gaps).map(({ at_us, ...event }) => ({
          ...event,
          at_us: fromFirst(at_us),
          after_mark: marks.filter((mark) => mark.at_us < at_us).length - 1,
        })),
      ).slice(0, MOST_EVENTS),
      ended,
    },
    rig: recording.plan.rig,
    amplitudes: recording.plan.amplitudes,
    note: '',
    made: { wall_ms: first.wall_ms, zone_offset_min: recording.zone_offset_min, ...maker },
  };
}

interface ClockGap {
  before: TapEvent;
  after: TapEvent;
  wall_minus_mono_ms: number;
}

function clockGaps(log: readonly TapEvent[]): ClockGap[] {
  return log.flatMap((after, i) => {
    const before = log[i - 1];
    if (!before) return [];
    const wall_minus_mono_ms = Math.round(after.wall_ms - before.wall_ms - (after.at_ms - before.at_ms));
    return Math.abs(wall_minus_mono_ms) > CLOCK_GAP_MS ? [{ before, after, wall_minus_mono_ms }] : [];
  });
}

/** First and last mark tell the rate of the clock; both sides of a gap tell what happened there. */
function anchorInstants(marks: readonly FoldedMark[], gaps: readonly ClockGap[]) {
  const sides = gaps
    .slice(0, MOST_GAP_ANCHORS)
    .flatMap(({ before, after }) => [before, after])
    .map(({ at_ms, wall_ms }) => ({ at_us: Math.round(at_ms * 1000), wall_ms }));
  const byTime = new Map([marks[0]!, ...sides, marks.at(-1)!].map((instant) => [instant.at_us, instant]));
  return [...byTime.values()].sort((a, b) => a.at_us - b.at_us);
}

function lifecycle(log: readonly TapEvent[], gaps: readonly ClockGap[]) {
  const seen = log.flatMap((event) =>
    event.kind === 'event' ? [{ kind: event.what, at_us: Math.round(event.at_ms * 1000) }] : [],
  );
  const parted = gaps.map(({ after, wall_minus_mono_ms }) => ({
    kind: 'clock_gap' as const,
    at_us: Math.round(after.at_ms * 1000),
    wall_minus_mono_ms,
  }));
  return [...seen, ...parted].sort((a, b) => a.at_us - b.at_us);
}
