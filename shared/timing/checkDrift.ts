import { dot, orthonormal, without } from '../statistics/orthonormal';
import { polynomials } from '../statistics/polynomials';
import { slopeUncertainty } from '../statistics/slopeUncertainty';
import { studentQuantile } from '../statistics/studentQuantile';
import type { Finding, Known } from './checkMarks';
import type { RunView } from './runView';
import { waysOf } from './waysOf';

const FEWEST_MARKS = 14;
/** One good run in five hundred may be flagged. */
const CONFIDENCE = 0.998;
/** Of T0, from the first mark to the last: a string of 1 m that gives way by 1 mm. */
const LEAST_SHARE = 5e-4;
/** Degree of the curve that a drift of any kind keeps to. */
const SMOOTH = 5;

/**
 * Marks that bow off the fitted motion: T0 was not the same all along, because a string slipped, a clock ran
 * unevenly, or the amplitudes are not those of this run. Needs a fitted motion, for without one the falling
 * amplitude bends the marks too.
 *
 * @see score test: Rao, Proc. Camb. Phil. Soc. 44, 50 (1948) (from memory)
 */
export function checkDrift(view: RunView, { elapsed, residuals, basis, followsMotion }: Known): Finding[] {
  const used = view.marks.filter((mark) => mark.swing !== null);
  if (!followsMotion || used.length < FEWEST_MARKS || residuals.length !== used.length) return [];
  const bow = polynomials(elapsed, 2)[2]!;
  // The fit has taken a part of any bow; what is left of one of size 1:
  const left = bow.map((v, i) => v - basis.reduce((sum, q) => sum + q[i]! * dot(q, bow), 0));
  const size = dot(bow, residuals) / dot(bow, left);
  // Jitter is what is left of a smooth curve, or the bow itself would count as jitter that hangs together.
  const smooth = orthonormal([...polynomials(elapsed, SMOOTH), ...waysOf(view)]);
  if (!smooth || !(dot(bow, left) > 1e-9)) return [];
  const found = slopeUncertainty({ residuals: without(residuals, smooth), slopeWeights: left, basis: smooth });
  if (!found) return [];
  // Hands err together with their neighbours; the edges of a gate do not.
  const isByHand = view.capture.kind !== 'gate';
  const together = isByHand ? Math.max(found.u / (found.jitter * Math.sqrt(dot(left, left))), 1) : 1;
  const dof = isByHand ? found.dof : used.length - smooth.length;
  const u = (found.jitter * together) / Math.sqrt(dot(bow, left));
  const reach = (elapsed.at(-1)! - elapsed[0]!) / 2;
  const period = (used.at(-1)!.time - used[0]!.time) / (2 * reach);
  // t = a + b x + c x² grows by b + 2 c x a step of x, so T0 changes by 4 c over the run; a step is a reach.
  const change = (4 * size) / reach;
  if (Math.abs(change) <= LEAST_SHARE * period || Math.abs(size) <= studentQuantile(CONFIDENCE, dof) * u) return [];
  const seen = { change_ms: 1000 * change, bow_ms: 1000 * size, jitter_ms: 1000 * found.jitter };
  return [{ code: 'drift', mark: null, seen, choices: ['keep_flagged'] }];
}
