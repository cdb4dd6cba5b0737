import { expectedPeriod } from '../physics/reducedLength';
import type { Finding, Known } from './checkMarks';
import type { RunView } from './runView';
import { hypot } from '../statistics/hypot';

/** A count is in doubt when the period is this many standard uncertainties off … */
const FAR = 3;
/** … and another count brings it within this many. */
const NEAR = 2.5;
/** How much longer than T0 a period may be while no amplitude is known: 0 to 1.5 % (up to 28°), as a middle and a u. */
const UNKNOWN_AMPLITUDE = { excess: 0.0075, u: 0.0075 / Math.sqrt(3) };

/**
 * Counts that do not fit the length: half swings counted as swings, and one swing too many or too few in
 * a total that was keyed in. Needs a rig that tells the period to expect.
 */
export function checkCount(view: RunView, known: Known): Finding[] {
  const expected = view.rig ? expectedPeriod(view.rig) : undefined;
  const found = known.smallPeriod ?? withoutAmplitude(known);
  if (!expected || !found || view.swings === null || view.capture.kind === 'gate') return [];
  const offBy = (factor: number) =>
    Math.abs(found.value * factor - expected.value) / hypot(found.u * factor, expected.u);
  if (offBy(1) <= FAR) return [];

  const seen = { swings: view.swings, period_s: found.value, expected_s: expected.value };
  const ratio = found.value / expected.value;
  if (view.swingsPerMark >= 1 && ratio > 0.4 && ratio < 0.6 && offBy(2) < offBy(1) / 4) {
    return [
      {
        code: 'half_swings',
        mark: null,
        seen: { ...seen, ratio },
        choices: ['reread_as_half_swings', 'set_swings', 'keep_flagged'],
      },
    ];
  }
  if (view.capture.kind !== 'keyed_total') return [];
  const counts = [view.swings - 1, view.swings + 1].filter((count) => count > 0);
  const fitting = counts.find((count) => offBy(view.swings! / count) < NEAR);
  if (fitting === undefined) return [];
  return [
    {
      code: 'count_from_one',
      mark: null,
      seen: { ...seen, swings_that_fit: fitting },
      choices: ['set_swings', 'keep_flagged'],
    },
  ];
}

function withoutAmplitude({ period }: Known) {
  if (!period) return undefined;
  const value = period.value / (1 + UNKNOWN_AMPLITUDE.excess);
  return { value, u: hypot(period.u, value * UNKNOWN_AMPLITUDE.u) };
}
