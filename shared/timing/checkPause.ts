import { addedColumn } from '../statistics/addedColumn';
import { dot, orthonormal, without } from '../statistics/orthonormal';
import { polynomials } from '../statistics/polynomials';
import { quantile } from '../statistics/quantile';
import { slopeUncertainty } from '../statistics/slopeUncertainty';
import { studentQuantile } from '../statistics/studentQuantile';
import type { Finding, Known } from './checkMarks';
import type { RunView, ViewMark } from './runView';
import { waysOf } from './waysOf';

/** With fewer marks on either side of it a pause cannot be told from single marks that are off. */
const FEWEST_ASIDE = 4;
/** One good run in a thousand may be flagged, over all places a pause might be at. */
const CHANCE = 0.001;
/** Of a lap. Nobody interrupts a swing for less. Common practice, no source. */
export const LEAST_SHIFT = 0.05;

/**
 * One place from which on the beat goes on shifted by a part of a lap: the swinging or the timing was
 * interrupted there. A slow bend is left to the model; a single mark that is off explains the marks better
 * than a shift does when it is one.
 */
export function checkPause(view: RunView, { elapsed }: Known): Finding[] {
  const used = view.marks.filter((mark) => mark.swing !== null);
  const n = used.length;
  if (n < 2 * FEWEST_ASIDE + 2 || elapsed.length !== n) return [];
  const times = used.map(({ time }) => time);
  const columns = [...polynomials(elapsed, 3), ...waysOf(view)];
  const at = likeliestPlace(times, columns);
  if (at === undefined) return [];
  const fit = addedColumn(
    times,
    columns,
    times.map((_, i) => Number(i >= at)),
  );
  const found = fit && slopeUncertainty(fit);
  const lap = typicalLap(used, at);
  if (!found || Math.abs(fit.size) <= LEAST_SHIFT * lap) return [];
  const places = n - 2 * FEWEST_ASIDE + 1;
  if (Math.abs(fit.size) <= studentQuantile(1 - CHANCE / places, found.dof) * found.u) return [];
  return [pauseAt(used, at, lap, fit.size)];
}

/**
 * The flag for a pause.
 *
 * @param used   marks in force
 * @param at     place of the first mark after it
 * @param shift  by how much later the beat goes on, s
 */
export function pauseAt(used: ViewMark[], at: number, lap: number, shift: number): Finding {
  const isFirstLonger = at >= used.length - at;
  const kept = isFirstLonger ? used.slice(0, at) : used.slice(at);
  return {
    code: 'pause',
    mark: used[at]!.mark,
    seen: {
      lap_s: used[at]!.time - used[at - 1]!.time,
      typical_lap_s: lap,
      shift_ms: 1000 * shift,
      from_mark: kept[0]!.mark,
      to_mark: kept.at(-1)!.mark,
    },
    choices: ['keep_part', 'keep_flagged'],
  };
}

/**
 * Where a shift takes most from the sum of squares that the model leaves; undefined when a single mark that is
 * off takes more.
 */
function likeliestPlace(y: number[], columns: number[][]): number | undefined {
  const basis = orthonormal(columns);
  if (!basis) return undefined;
  const left = without(y, basis);
  let best: number | undefined;
  let most = 0;
  let byShift = 0;
  const along = basis.map(() => 0);
  for (let i = y.length - 1; i >= FEWEST_ASIDE; i -= 1) {
    byShift += left[i]!;
    basis.forEach((q, k) => (along[k]! += q[i]!));
    const size = y.length - i - dot(along, along);
    const taken = (byShift * byShift) / size;
    if (y.length - i < FEWEST_ASIDE || !(size > 1e-9) || taken <= most) continue;
    [best, most] = [i, taken];
  }
  const bySingle = left.map((r, i) => (r * r) / Math.max(1 - basis.reduce((sum, q) => sum + q[i]! ** 2, 0), 1e-9));
  return most > Math.max(...bySingle) ? best : undefined;
}

function typicalLap(used: ViewMark[], at: number): number {
  const laps = used.slice(1).map(({ time }, i) => time - used[i]!.time);
  return quantile(laps.slice(Math.max(0, at - 6), at + 5), 0.5);
}
