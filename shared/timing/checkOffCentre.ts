import { addedColumn } from '../statistics/addedColumn';
import { slopeUncertainty } from '../statistics/slopeUncertainty';
import { studentQuantile } from '../statistics/studentQuantile';
import type { Finding, Known } from './checkMarks';
import type { RunView } from './runView';
import { waysOf } from './waysOf';

const FEWEST_MARKS = 8;
/** One good run in three hundred may be flagged. */
const CONFIDENCE = 0.997;
/** Of a half swing. Nobody moves a mark or a gate for less. Common practice, no source. */
const LEAST_SHARE = 0.005;

/**
 * Half swings that take turns in being longer and shorter, because the mark or the gate is beside the lowest
 * point. The period is not harmed: the fit gives the two ways a constant each.
 *
 * @see the two halves of a swing differ by (4/ω) asin(φ/A) at an angle φ: elementary
 */
export function checkOffCentre(view: RunView, { elapsed, gateAngle }: Known): Finding[] {
  const used = view.marks.filter((mark) => mark.swing !== null);
  const [isOdd] = waysOf(view);
  if (!isOdd || used.length < FEWEST_MARKS || elapsed.length !== used.length) return [];
  const times = used.map(({ time }) => time);
  const swings = used.map(({ swing }) => swing!);
  const ones = used.map(() => 1);
  const half = (times.at(-1)! - times[0]!) / (2 * swings.at(-1)!);
  const limp = addedColumn(times, [ones, swings], isOdd)?.size ?? 0;
  if (Math.abs(limp) <= LEAST_SHARE * half) return [];
  // What grows evenly with time holds a gate's angle already, so there the fitted angle is the judge.
  const isSeen = gateAngle
    ? Math.abs(gateAngle.value) > studentQuantile(CONFIDENCE, Infinity) * gateAngle.u
    : isSignificant(times, [ones, elapsed], isOdd);
  if (!isSeen) return [];
  const [longer, shorter] = [half + Math.abs(limp), half - Math.abs(limp)];
  const seen = { longer_s: longer, shorter_s: shorter, difference_ms: 1000 * (longer - shorter) };
  return [{ code: 'off_centre', mark: null, seen, choices: ['keep_flagged'] }];
}

function isSignificant(times: number[], columns: number[][], isOdd: number[]): boolean {
  const fit = addedColumn(times, columns, isOdd);
  const found = fit && slopeUncertainty(fit);
  if (!found) return false;
  // Neighbours that err against one another, as taps in rhythm do, look like a limp; those that err together do not.
  const against = Math.min(found.lag1 ?? 0, 0);
  const independent = found.jitter * Math.sqrt(fit.slopeWeights.reduce((sum, w) => sum + w * w, 0));
  const u = Math.max(found.u, independent * Math.sqrt((1 - against) / (1 + against)));
  return Math.abs(fit.size) > studentQuantile(CONFIDENCE, found.dof) * u;
}
