import { invert } from './invert';

export interface LeastSquaresFit {
  unknowns: number[];
  /** Covariance of the unknowns when the residuals were divided by their standard uncertainties. */
  covariance: number[][];
  /** Sum of squared residuals. */
  chiSquare: number;
}

/**
 * Nonlinear least squares for a handful of unknowns, by damped Gauss–Newton steps with numerical
 * derivatives.
 *
 * @param residuals  what is left over for given unknowns, each divided by its standard uncertainty
 * @param start      near enough to the answer
 * @param within     brings unknowns back into the range they may have
 * @returns          undefined when the data do not fix the unknowns
 * @see Levenberg, Q. Appl. Math. 2, 164 (1944); Marquardt, J. SIAM 11, 431 (1963)
 */
export function leastSquares(
  residuals: (unknowns: number[]) => number[],
  start: number[],
  within: (unknowns: number[]) => number[],
): LeastSquaresFit | undefined {
  let unknowns = within(start);
  let left = residuals(unknowns);
  let chiSquare = sumOfSquares(left);
  let damping = 1e-6;
  for (let step = 0; step < 60 && damping < 1e9; step += 1) {
    const { information, gradient } = normalEquations(residuals, unknowns, left);
    const damped = invert(information.map((row, i) => row.map((v, j) => (i === j ? v * (1 + damping) : v))));
    if (!damped) return undefined;
    const tried = within(unknowns.map((v, i) => v - dot(damped[i]!, gradient)));
    const leftThen = residuals(tried);
    const chiSquareThen = sumOfSquares(leftThen);
    if (!(chiSquareThen <= chiSquare)) {
      damping *= 10;
      continue;
    }
    const isSettled = chiSquare - chiSquareThen <= 1e-12 * chiSquare;
    [unknowns, left, chiSquare, damping] = [tried, leftThen, chiSquareThen, damping / 10];
    if (isSettled) break;
  }
  const covariance = invert(normalEquations(residuals, unknowns, left).information);
  return covariance && { unknowns, covariance, chiSquare };
}

function normalEquations(residuals: (unknowns: number[]) => number[], unknowns: number[], left: number[]) {
  const slopes = unknowns.map((v, i) => {
    const step = 1e-4 * Math.max(Math.abs(v), 0.01);
    const [up, down] = [step, -step].map((by) => residuals(unknowns.map((w, j) => (i === j ? w + by : w))));
    return left.map((_, k) => (up![k]! - down![k]!) / (2 * step));
  });
  return {
    information: slopes.map((a) => slopes.map((b) => dot(a, b))),
    gradient: slopes.map((a) => dot(a, left)),
  };
}

function dot(a: number[], b: number[]): number {
  return a.reduce((sum, v, i) => sum + v * b[i]!, 0);
}

function sumOfSquares(v: number[]): number {
  return dot(v, v);
}
