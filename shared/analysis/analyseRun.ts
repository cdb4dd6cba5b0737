import type { Analysis, MarkRow } from '../schemas/analysis';
import { canonicalText, digestOf } from '../schemas/canonical';
import type { RawEdit } from '../schemas/edit';
import type { RawRun } from '../schemas/run';
import { reducedLength } from '../physics/reducedLength';
import { missingReadings } from '../physics/rigBody';
import { foldRun, inForce } from '../timing/foldRun';
import type { RunView } from '../timing/runView';
import { degrees } from '../units/angle';
import { correctedGravity } from './correctedGravity';
import { findFlags } from './findFlags';
import type { Estimate, Fit } from './method';
import { motionMethod } from './motionMethod';
import { stateResult } from './stateResult';

/** A raw run or edit with the digest of its canonical text. */
export interface Sealed<T> {
  digest: string;
  content: T;
}

/** The method in use; a run analysed by another is analysed anew. */
export const METHOD = motionMethod;

/**
 * Everything that is computed from a run and its edits: the one entry for phone and server, which
 * print the same digits. What cannot be computed is null, and `missing` says what would bring it, in
 * the order a person should give it.
 *
 * Marks are taken as they are until an edit says otherwise: a lap that looks like two swings counts as
 * one, T is then plainly off and its uncertainty wide, and the flag says why. Renumbering without being
 * asked would put a guess of the program's in place of a record, and nobody would look.
 *
 * `budget` is that of T0, or of T while T0 is not known.
 *
 * @param run    any run that keeps the schema
 * @param edits  in the order they count
 * @returns      finite numbers or null; nothing is thrown
 */
export function analyseRun({ run, edits }: { run: Sealed<RawRun>; edits: Sealed<RawEdit>[] }): Analysis {
  const changes = edits.map((edit) => edit.content);
  const view = foldRun(run.content, changes);
  const fit = METHOD.fit(view);
  const period = stated(fit.period);
  const smallPeriod = stated(fit.smallPeriod);
  const length = view.rig && reducedLength(view.rig);
  const gravity = smallPeriod && view.rig ? correctedGravity(fit.smallPeriod!, view.rig) : undefined;
  return {
    run_id: run.content.id,
    input_digest: inputDigest(run, edits),
    method: METHOD.id,
    swings: view.swings,
    marks_used: view.marks.filter((mark) => !mark.leftOut).length,
    period_s: period,
    small_period_s: smallPeriod,
    amplitude: smallPeriod && amplitudeOf(fit),
    jitter_s: fit.jitter,
    lag1: fit.lag1,
    motion: motionOf(fit),
    length_m: length ? { value: length.value, u: length.u } : null,
    g_m_s2: gravity ? stateResult(gravity.value, gravity.shares) : null,
    corrections: gravity?.corrections ?? [],
    budget: (smallPeriod && fit.smallPeriod?.shares) ?? (period && fit.period?.shares) ?? [],
    g_budget: gravity?.shares ?? [],
    flags: findFlags(run.content, changes, { view, fit }, METHOD),
    marks: markRows(view, fit),
    missing: [...fit.missing, ...(view.rig ? missingReadings(view.rig) : (['length'] as const))],
  };
}

/**
 * Over what the analysis was computed from and nothing else: a note, setting the run aside, or an edit
 * that was made and withdrawn again changes no figure, so it makes no other analysis.
 */
function inputDigest(run: Sealed<RawRun>, edits: Sealed<RawEdit>[]): string {
  const counting = new Set(
    inForce(edits.map(({ content }) => content)).filter(
      ({ change: { kind } }) => kind !== 'note' && kind !== 'set_aside',
    ),
  );
  const digests = edits.filter(({ content }) => counting.has(content)).map(({ digest }) => digest);
  return digestOf(canonicalText({ run: run.digest, edits: digests, method: METHOD.id }));
}

function stated(estimate: Estimate | null) {
  return estimate && estimate.value > 0 ? stateResult(estimate.value, estimate.shares) : null;
}

function amplitudeOf({ amplitude }: Fit): Analysis['amplitude'] {
  if (!amplitude) return null;
  const inDegrees = ({ value, u }: { value: number; u: number }) => ({ value: degrees(value), u: degrees(u) });
  return {
    ratio: amplitude.ratio,
    start_deg: inDegrees(amplitude.start),
    end_deg: inDegrees(amplitude.end),
    decay_known: amplitude.decayKnown,
  };
}

/** From this chance on, a law counts as the one that acts. */
const LIKELY = 0.8;

function motionOf({ motion }: Fit): Analysis['motion'] {
  if (!motion) return null;
  const inDegrees = ({ value, u }: { value: number; u: number }) => ({ value: degrees(value), u: degrees(u) });
  const { event, path, converged, release, chances, gateAngle } = motion;
  const acting = (['viscous', 'quadratic', 'dry'] as const).filter((law) => chances[law] >= LIKELY);
  const [law] = acting;
  const alone = law && Object.entries(chances).every(([other, chance]) => other === law || chance < 1 / 2);
  return {
    ...{ event, path, converged, chances },
    release_swing: release.swing,
    release_s: release.time,
    release_deg: inDegrees(release.amplitude),
    gamma_per_s: motion.viscous,
    beta: motion.quadratic,
    c: motion.dry,
    law: alone ? law : acting.length > 1 ? 'mixed' : 'not_known',
    gate_angle_deg: gateAngle && inDegrees(gateAngle),
  };
}

function markRows(view: RunView, fit: Fit): MarkRow[] {
  let before: number | null = null;
  let used = 0;
  return view.marks.map(({ mark, swing, time, leftOut }) => {
    if (leftOut) return { mark, swing: null, time_s: time, lap_s: null, residual_s: null };
    const row = {
      mark,
      swing,
      time_s: time,
      lap_s: before === null ? null : time - before,
      residual_s: fit.residuals[used] ?? null,
    };
    before = time;
    used += 1;
    return row;
  });
}
