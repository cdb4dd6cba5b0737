import { fitLine } from '../statistics/fitLine';
import { studentQuantile } from '../statistics/studentQuantile';
import type { Finding, Known } from './checkMarks';
import type { RunView } from './runView';
import { hypot } from '../statistics/hypot';

const FEWEST_MARKS = 8;
/** One good run in five hundred may be flagged. */
const CONFIDENCE = 0.998;
/** s. Half of the usual reaction to a release; what is less does not matter. */
const LEAST_LATE = 0.06;
/** T/T0 at 60°: in a first swing larger than that the averaged amplitude is no judge of one mark. */
const LARGEST_RATIO = 1.073;

/**
 * A first mark that does not lie on the line of all the others: pressed in reaction to the release, or on
 * the release itself. Only for hands; a gate does not react.
 */
export function checkFirstMark({ marks, capture, swingsPerMark }: RunView, { elapsed }: Known): Finding[] {
  const used = marks.filter((mark) => mark.swing !== null);
  if (capture.kind === 'gate' || used.length < FEWEST_MARKS || elapsed.length !== used.length) return [];
  if (elapsed[1]! > LARGEST_RATIO * (used[1]!.swing ?? 0)) return [];
  const others = used.slice(1);
  const isOdd = swingsPerMark === 0.5 ? others.map((mark) => Math.round(2 * mark.swing!) % 2 === 1) : undefined;
  const line = fitLine(
    elapsed.slice(1),
    others.map((mark) => mark.time),
    isOdd,
  );
  if (!line) return [];
  const spare = others.length - line.basis.length;
  const jitter = Math.sqrt(line.residuals.reduce((sum, r) => sum + r * r, 0) / spare);
  // The line is carried back by one step, which doubts of its slope and its level widen.
  const mean = elapsed.slice(1).reduce((sum, x) => sum + x, 0) / others.length;
  const weights = hypot(...line.slopeWeights);
  const u = jitter * Math.sqrt(1 + 1 / others.length + ((mean - elapsed[0]!) * weights) ** 2);
  const late = used[0]!.time - (line.intercept + line.slope * elapsed[0]!);
  if (Math.abs(late) <= Math.max(studentQuantile(CONFIDENCE, spare) * u, LEAST_LATE)) return [];
  return [
    {
      code: 'late_first_mark',
      mark: used[0]!.mark,
      seen: { late_ms: 1000 * late, jitter_ms: 1000 * jitter },
      choices: ['leave_out_mark', 'keep_flagged'],
    },
  ];
}
