import { invert } from '../../statistics/invert';
import { averageLosses } from './averageLosses';
import type { Places } from './motionUnknowns';
import type { MotionStart } from './startMotion';

/**
 * The losses by themselves, all other unknowns taken out (Schur's complement), then the others given the
 * losses: everything but the losses is a plain least-squares problem.
 */
export function splitLosses(
  information: number[][],
  gradient: number[],
  values: number[],
  { losses }: Places,
  begin: MotionStart,
) {
  const plain = values.map((_, i) => i).filter((i) => !losses.includes(i));
  const inverse = invert(plain.map((i) => plain.map((j) => information[i]![j]!)));
  if (!inverse) return undefined;
  // By how much an unknown moves when a loss does.
  const follow = inverse.map((row) =>
    losses.map((loss) => -row.reduce((sum, c, j) => sum + c * information[plain[j]!]![loss]!, 0)),
  );
  const alone = inverse.map((row) => row.reduce((sum, c, j) => sum + c * gradient[plain[j]!]!, 0));
  const found = averageLosses(
    {
      values: losses.map((loss) => values[loss]!),
      information: losses.map((a) =>
        losses.map(
          (b, k) => information[a]![b]! + plain.reduce((sum, i, j) => sum + information[a]![i]! * follow[j]![k]!, 0),
        ),
      ),
      gradient: losses.map(
        (loss) => gradient[loss]! - plain.reduce((sum, i, j) => sum + information[loss]![i]! * alone[j]!, 0),
      ),
    },
    { sum: begin.loss, spread: begin.lossSpread },
  );
  if (!found) return undefined;
  const mean = [...values];
  losses.forEach((loss, k) => (mean[loss] = found.mean[k]!));
  plain.forEach((i, j) => {
    mean[i] =
      values[i]! +
      alone[j]! +
      losses.reduce((sum, loss, k) => sum + follow[j]![k]! * (found.mean[k]! - values[loss]!), 0);
  });
  const spread = (ofLosses: number[][]) => {
    const c = values.map(() => values.map(() => 0));
    losses.forEach((a, k) => losses.forEach((b, l) => (c[a]![b] = ofLosses[k]![l]!)));
    plain.forEach((i, j) => {
      const withLosses = losses.map((_, l) => follow[j]!.reduce((sum, f, k) => sum + f * ofLosses[k]![l]!, 0));
      losses.forEach((b, l) => (c[i]![b] = c[b]![i] = withLosses[l]!));
      plain.forEach((m, n) => {
        c[i]![m] = inverse[j]![n]! + withLosses.reduce((sum, v, l) => sum + v * follow[n]![l]!, 0);
      });
    });
    return c;
  };
  return { mean, covariance: spread(found.covariance), within: spread(found.within), chances: found.chances };
}
