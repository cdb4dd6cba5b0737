import type { LineFit } from './fitLine';

/**
 * Residuals of a fit in which the value of interest is Σ slopeWeights[i] y[i] and the points pull the model
 * along the columns of `basis` (basis basisᵀ is the hat matrix; columns are shorter than 1 where other
 * knowledge holds the model back).
 */
export type Scattered = Pick<LineFit, 'residuals' | 'slopeWeights' | 'basis'>;

export interface SlopeUncertainty {
  /** Standard uncertainty of the slope. */
  u: number;
  /** Effective degrees of freedom, ≥ 1. */
  dof: number;
  /** Standard deviation of one point about the line. */
  jitter: number;
  /** Lag-1 correlation of the residuals as it is, in [−1, 1]; undefined with too few points or none off the line. */
  lag1: number | undefined;
}

/** Below this many points the residuals say next to nothing about their correlation. */
const FEWEST_FOR_LAG1 = 8;
const LARGEST_CORRELATION = 0.95;
/** Fewer would multiply the interval by up to twelve for no better coverage. */
const FEWEST_DOF = 3;

/**
 * Uncertainty of a least-squares slope when neighbouring points may err together, as taps do: people
 * fall in with the swing. The errors are taken as a first-order autoregressive series.
 *
 * The residuals' own lag-1 correlation is too low, because the line has taken part of any slow drift;
 * it is corrected for that, and a negative one counts as none: it would make the uncertainty smaller on
 * weak evidence.
 *
 * @param fit  three or more points more than a line has unknowns to be of use
 * @returns    undefined when no point is left over to judge by
 * @see bias of the lag-1 correlation about a fitted trend: Tjøstheim & Paulsen, Biometrika 70, 389 (1983)
 */
export function slopeUncertainty(fit: Scattered): SlopeUncertainty | undefined {
  const n = fit.residuals.length;
  const unknowns = degreesTaken(fit);
  const free = n - unknowns;
  if (free < 1) return undefined;
  const squares = fit.residuals.reduce((sum, r) => sum + r * r, 0);
  const lag1 = n >= FEWEST_FOR_LAG1 && squares > 0 ? neighbours(fit.residuals) / squares : undefined;
  const rho = lag1 === undefined ? 0 : cautiousCorrelation(lag1, fit);
  const taken = fit.basis.reduce((sum, column) => sum + quadraticForm(column, rho), 0);
  const variance = squares / Math.max(n - taken, 1);
  return {
    u: Math.sqrt(variance * quadraticForm(fit.slopeWeights, rho)),
    dof: Math.max((free * (1 - rho)) / (1 + rho), Math.min(free, FEWEST_DOF)),
    jitter: Math.sqrt(squares / free),
    lag1: lag1 === undefined ? undefined : Math.min(Math.max(lag1, -1), 1),
  };
}

/** How many degrees of freedom a basis takes: one a column of unit length. */
function degreesTaken({ basis }: Scattered): number {
  return basis.reduce((sum, column) => sum + column.reduce((s, v) => s + v * v, 0), 0);
}

function cautiousCorrelation(lag1: number, fit: Scattered): number {
  const n = fit.residuals.length;
  const unknowns = degreesTaken(fit);
  // Expected lag-1 of residuals of independent errors is minus this sum over n − unknowns.
  const drift = fit.basis.reduce((sum, column) => sum + neighbours(column), 0) / (n - unknowns);
  return Math.min(Math.max(((lag1 + drift) * n) / Math.max(n - 2 * unknowns, 2), 0), LARGEST_CORRELATION);
}

/** Σ v[i] v[i−1]. */
function neighbours(v: number[]): number {
  let sum = 0;
  for (let i = 1; i < v.length; i += 1) sum += v[i]! * v[i - 1]!;
  return sum;
}

/** vᵀRv with R[i][j] = rho^|i−j|, in one pass: the variance of Σ v[i] e[i] for errors e of unit variance and lag-1 correlation rho. */
export function quadraticForm(v: number[], rho: number): number {
  let sum = 0;
  let carried = 0;
  for (const x of v) {
    sum += x * x + 2 * x * carried;
    carried = rho * (carried + x);
  }
  return Math.max(sum, 0);
}
