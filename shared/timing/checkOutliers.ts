import { quantile } from '../statistics/quantile';
import type { Finding, Known } from './checkMarks';
import type { RunView } from './runView';

const FEWEST_MARKS = 8;
/** Standard deviations, judged by the middle half of the residuals so that the odd one does not hide itself. */
const DEVIATIONS = 5;
/** s. What a hand is off by and nobody argues about; for a gate, only its jitter counts. */
const LEAST_OFF_BY_HAND = 0.06;
const LEAST_OFF_AT_GATE = 0.001;

/**
 * Marks that stand far off the fit while the others keep to it. The first mark has a check of its own.
 *
 * @see median of absolute deviations, 1.4826 of it for a normal law: common practice, no source
 */
export function checkOutliers({ marks, capture }: RunView, { residuals }: Known): Finding[] {
  const used = marks.filter((mark) => mark.swing !== null);
  if (used.length < FEWEST_MARKS || residuals.length !== used.length) return [];
  const sizes = residuals.map(Math.abs);
  const jitter = 1.4826 * quantile(sizes, 0.5);
  const least = capture.kind === 'gate' ? LEAST_OFF_AT_GATE : LEAST_OFF_BY_HAND;
  const limit = Math.max(DEVIATIONS * jitter, least);
  return used.flatMap(({ mark }, i): Finding[] => {
    if (i === 0 || sizes[i]! <= limit) return [];
    const seen = { late_ms: 1000 * residuals[i]!, jitter_ms: 1000 * jitter };
    return [{ code: 'outlier', mark, seen, choices: ['leave_out_mark', 'keep_flagged'] }];
  });
}
