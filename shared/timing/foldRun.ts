import type { EditChange, RawEdit } from '../schemas/edit';
import type { RawRun } from '../schemas/run';
import { gateMarks } from './gateMarks';
import { numberMarks, spreadSwings } from './numberMarks';
import type { RunView, ViewAmplitude } from './runView';

/**
 * Lays the edits over a run. A pure fold: same run and edits in the same order, same view.
 * A withdrawn edit counts as if it had never been made; a withdrawal can itself be withdrawn.
 * Edits of another run are passed over.
 *
 * @param run    the raw part, never touched
 * @param edits  in the order they count
 * @returns      what is in force
 * @example foldRun(run, [edit({ kind: 'leave_out_mark', mark: 12 })]).marks[12].leftOut // true
 */
export function foldRun(run: RawRun, edits: RawEdit[]): RunView {
  const standing = inForce(edits.filter((edit) => edit.run_id === run.id));
  const changes = standing.map((edit) => edit.change);
  const halved = changes.some((change) => change.kind === 'reread_as_half_swings');
  const capture = run.capture;
  const swingsPerMark = rawSwingsPerMark(run) * (halved ? 0.5 : 1);
  const setSwings = changes.findLast((change) => change.kind === 'set_swings')?.swings;
  const described = { ...describe(run, changes), setAside: setAside(standing) };

  if (capture.kind === 'keyed_total') {
    const counted = capture.counted_to - (capture.first_count === 'one' ? 1 : 0);
    const swings = setSwings ?? counted * (halved ? 0.5 : 1);
    return {
      ...described,
      marks: [],
      swingsPerMark,
      swings: swings > 0 ? swings : null,
      duration: capture.total_us / 1e6,
      readingStep: capture.reading_step_us / 1e6,
    };
  }

  const blocks = capture.kind === 'gate' ? gateMarks(capture) : [];
  const times = capture.kind === 'gate' ? blocks.map((block) => block.time) : capture.mark_us.map((us) => us / 1e6);
  const out = leftOut(changes, times.length);
  const pieces = new Set([...out, ...blocks.flatMap(({ partOf }, i) => (partOf === null ? [] : [i]))]);
  const numbered = numberMarks(times, { swingsPerMark, leftOut: pieces, gaps: gaps(run, changes) });
  const withBlocks = numbered.marks.map((mark, i) => {
    const block = blocks[i];
    return block ? { ...mark, blockedTime: block.blockedTime, partOf: out.has(i) ? null : block.partOf } : mark;
  });
  const marks = setSwings === undefined ? withBlocks : spreadSwings(withBlocks, setSwings, swingsPerMark);
  const used = marks.filter((mark) => !mark.leftOut);
  const [first, last] = [used[0], used.at(-1)];
  return {
    ...described,
    amplitudes: described.amplitudes.map((reading) => ({ ...reading, swing: reading.swing - numbered.origin })),
    marks,
    swingsPerMark,
    swings: used.length > 1 ? last!.swing : null,
    duration: first && last ? last.time - first.time : 0,
    readingStep: (capture.kind === 'tap' ? capture.clock.step_us : capture.reading_step_us) / 1e6,
  };
}

/** The edits no withdrawal in force takes out. Later ones decide first, so a withdrawal can be withdrawn. */
export function inForce(edits: RawEdit[]): RawEdit[] {
  const withdrawn = new Set<string>();
  const kept: RawEdit[] = [];
  for (const edit of [...edits].reverse()) {
    if (withdrawn.has(edit.id)) continue;
    if (edit.change.kind === 'withdraw') withdrawn.add(edit.change.edit_id);
    else kept.unshift(edit);
  }
  return kept;
}

/** Why a run does not count: the last word that sets it aside; null while it counts. */
export function setAside(standing: RawEdit[]): RunView['setAside'] {
  const edit = standing.findLast(({ change }) => change.kind === 'set_aside');
  return edit ? { editId: edit.id, reason: edit.reason } : null;
}

function rawSwingsPerMark(run: RawRun): number {
  if (run.capture.kind === 'keyed_total') return 1;
  return run.capture.kind === 'gate' ? 0.5 : run.capture.swings_per_mark;
}

function leftOut(changes: EditChange[], marks: number): Set<number> {
  const out = new Set<number>();
  for (const change of changes) {
    if (change.kind === 'leave_out_mark') out.add(change.mark);
    if (change.kind !== 'keep_part') continue;
    for (let mark = 0; mark < marks; mark += 1) if (mark < change.from_mark || mark > change.to_mark) out.add(mark);
  }
  return out;
}

/** Marks missing before each mark: told on the pad, then added by edits. */
function gaps(run: RawRun, changes: EditChange[]): Map<number, number> {
  const told = run.capture.kind === 'tap' ? run.capture.missed : [];
  const added = changes.filter((change) => change.kind === 'insert_gap');
  const counts = new Map<number, number>();
  for (const gap of [...told, ...added]) {
    counts.set(gap.before_mark, (counts.get(gap.before_mark) ?? 0) + gap.count);
  }
  return counts;
}

function describe(run: RawRun, changes: EditChange[]) {
  let rig = run.rig;
  let amplitudes: ViewAmplitude[] = run.amplitudes;
  const notes = run.note === '' ? [] : [run.note];
  const kept: RunView['kept'] = [];
  let halved = false;
  for (const change of changes) {
    if (change.kind === 'set_rig') rig = change.rig;
    if (change.kind === 'set_amplitudes') amplitudes = change.amplitudes;
    if (change.kind === 'note') notes.push(change.text);
    if (change.kind === 'keep_flagged') kept.push({ flag: change.flag, mark: change.mark });
    if (change.kind === 'reread_as_half_swings' && !halved) {
      // Readings made before were counted in what turned out to be half swings.
      halved = true;
      amplitudes = amplitudes.map((reading) => ({ ...reading, swing: reading.swing / 2 }));
    }
  }
  return { runId: run.id, capture: run.capture, rig, amplitudes, notes, kept };
}
