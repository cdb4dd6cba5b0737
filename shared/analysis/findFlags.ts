import type { Flag } from '../schemas/analysis';
import type { EditKind, RawEdit } from '../schemas/edit';
import type { RawRun } from '../schemas/run';
import { checkMarks } from '../timing/checkMarks';
import { foldRun, inForce } from '../timing/foldRun';
import type { RunView } from '../timing/runView';
import type { Fit, Method } from './method';
import { readAmplitudes } from './readAmplitudes';
import { stateResult } from './stateResult';

/** Edits that take away what a flag was about, rather than saying it was looked at. */
const CURES: EditKind[] = ['leave_out_mark', 'insert_gap', 'reread_as_half_swings', 'set_swings', 'keep_part'];

/**
 * All flags of a run: those of the run as it is now, and those of before the cures, which are answered
 * because they are gone. A flag that was kept on purpose stays and is answered too.
 *
 * @param view  of the run with all its edits, and
 * @param fit   what the method found in it
 */
export function findFlags(
  run: RawRun,
  edits: RawEdit[],
  { view, fit }: { view: RunView; fit: Fit },
  method: Method,
): Flag[] {
  const now = flagsOf(view, fit);
  const valid = inForce(edits);
  const uncured = valid.filter((edit) => !CURES.includes(edit.change.kind));
  if (uncured.length === valid.length) return now;
  const viewBefore = foldRun(run, uncured);
  const before = flagsOf(viewBefore, method.fit(viewBefore));
  const isNow = (flag: Flag) => now.some((other) => other.code === flag.code && other.mark === flag.mark);
  return [...now, ...before.filter((flag) => !isNow(flag)).map((flag) => ({ ...flag, answered: true }))];
}

function flagsOf(view: RunView, { elapsed, residuals, basis, period, smallPeriod, motion }: Fit): Flag[] {
  return checkMarks(view, {
    elapsed,
    residuals,
    basis,
    period: period && stateResult(period.value, period.shares),
    smallPeriod: smallPeriod && stateResult(smallPeriod.value, smallPeriod.shares),
    readings: readAmplitudes(view.amplitudes),
    followsMotion: motion !== null,
    gateAngle: motion?.gateAngle ?? null,
  });
}
