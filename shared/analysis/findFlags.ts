import type { Flag } from '../schemas/analysis';
import type { EditKind, RawEdit } from '../schemas/edit';
import type { RawRun } from '../schemas/run';
import { checkMarks } from '../timing/checkMarks';
import { foldRun, inForce } from '../timing/foldRun';
import type { Method } from './method';
import { stateResult } from './stateResult';

/** Edits that take away what a flag was about, rather than saying it was looked at. */
const CURES: EditKind[] = ['leave_out_mark', 'insert_gap', 'reread_as_half_swings', 'set_swings'];

/**
 * All flags of a run: those of the run as it is now, and those of before the cures, which are answered
 * because they are gone. A flag that was kept on purpose stays and is answered too.
 */
export function findFlags(run: RawRun, edits: RawEdit[], method: Method): Flag[] {
  const valid = inForce(edits);
  const cures = valid.filter((edit) => CURES.includes(edit.change.kind));
  const now = flagsOf(run, valid, method);
  if (cures.length === 0) return now;
  const before = flagsOf(
    run,
    valid.filter((edit) => !cures.includes(edit)),
    method,
  );
  const isNow = (flag: Flag) => now.some((other) => other.code === flag.code && other.mark === flag.mark);
  return [...now, ...before.filter((flag) => !isNow(flag)).map((flag) => ({ ...flag, answered: true }))];
}

function flagsOf(run: RawRun, edits: RawEdit[], method: Method): Flag[] {
  const view = foldRun(run, edits);
  const fit = method.fit(view);
  return checkMarks(view, {
    elapsed: fit.elapsed,
    period: fit.period && stateResult(fit.period.value, fit.period.shares),
    smallPeriod: fit.smallPeriod && stateResult(fit.smallPeriod.value, fit.smallPeriod.shares),
  });
}
