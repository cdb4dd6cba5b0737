import { exp } from '../physics/elementary';
import { studentQuantile } from '../statistics/studentQuantile';
import type { Finding, Known } from './checkMarks';
import type { RunView } from './runView';

const FEWEST_MARKS = 8;
/** Three good runs in a thousand may be flagged, over all its marks. */
const CHANCE = 0.003;
/** Of the marks, those farthest off, which have no say in what jitter is. */
const TRIMMED = 1 / 8;
/** s. What a hand is off by and nobody argues about; for a gate, only its jitter counts. */
const LEAST_OFF_BY_HAND = 0.06;
const LEAST_OFF_AT_GATE = 0.001;

/** Marks that stand far off the fit while the others keep to it. The first mark has a check of its own. */
export function checkOutliers({ marks, capture }: RunView, { residuals, basis }: Known): Finding[] {
  const used = marks.filter((mark) => mark.swing !== null);
  if (used.length < FEWEST_MARKS || residuals.length !== used.length) return [];
  const sizes = residuals.map(Math.abs);
  const { jitter, dof } = trimmedJitter(sizes, basis.length);
  const least = capture.kind === 'gate' ? LEAST_OFF_AT_GATE : LEAST_OFF_BY_HAND;
  const limit = Math.max(studentQuantile(1 - CHANCE / used.length, dof) * jitter, least);
  return used.flatMap(({ mark }, i): Finding[] => {
    if (i === 0 || sizes[i]! <= limit) return [];
    const seen = { late_ms: 1000 * residuals[i]!, jitter_ms: 1000 * jitter };
    return [{ code: 'outlier', mark, seen, choices: ['leave_out_mark', 'keep_flagged'] }];
  });
}

/**
 * Standard deviation from the residuals nearest to the fit, so that one far off does not hide itself.
 *
 * @see variance of a normal law cut off at ±q, 1 − 2 q φ(q)/(1 − p): Johnson, Kotz & Balakrishnan, Continuous
 *      Univariate Distributions 1, 13.10.1 (from memory)
 */
function trimmedJitter(sizes: number[], unknowns: number): { jitter: number; dof: number } {
  const cut = Math.ceil(TRIMMED * sizes.length);
  const near = [...sizes].sort((a, b) => a - b).slice(0, sizes.length - cut);
  const share = cut / sizes.length;
  const q = studentQuantile(1 - share, Infinity);
  const density = exp(-(q * q) / 2) / Math.sqrt(2 * Math.PI);
  const kept = 1 - (2 * q * density) / (1 - share);
  const free = Math.max(near.length - unknowns, 1);
  return { jitter: Math.sqrt(near.reduce((sum, size) => sum + size * size, 0) / (free * kept)), dof: free };
}
