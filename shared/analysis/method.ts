import type { BudgetLine } from '../schemas/analysis';
import type { MISSING } from '../schemas/analysis';
import type { Measured } from '../schemas/common';
import type { RunView } from '../timing/runView';

/** A value with everything that makes it uncertain, in SI. */
export interface Estimate {
  value: number;
  shares: BudgetLine[];
}

/** What a method finds in a view. Fields are null when the view does not hold enough. */
export interface Fit {
  /** Mean period over the run, s. */
  period: Estimate | null;
  /** Period at small amplitude, s. */
  smallPeriod: Estimate | null;
  amplitude: {
    /** T/T0 over the run. */
    ratio: number;
    /** rad */
    start: Measured;
    end: Measured;
    decayKnown: boolean;
  } | null;
  /** s, standard deviation of one mark about the fit. */
  jitter: number | null;
  lag1: number | null;
  /** For each mark in force: what grows evenly with time when the fit is right. */
  elapsed: number[];
  /** For each mark in force, observed minus calculated, s; empty when nothing was fitted. */
  residuals: number[];
  /** How marks pull the fit along, one row of all marks a column: `Scattered` in slopeUncertainty. */
  basis: number[][];
  missing: (typeof MISSING)[number][];
  /** The motion behind it; null when none was fitted. */
  motion: FittedMotion | null;
}

/** A pendulum's motion as fitted. */
export interface FittedMotion {
  /** What was marked: passes of the lowest point or turning points. */
  event: 'pass' | 'turn';
  path: 'averaged' | 'integrated';
  converged: boolean;
  /** The turning point it is followed from: its swing, when it was, s since the first raw mark, and its amplitude, rad. */
  release: { swing: number; time: number; amplitude: Measured };
  /** γ in 1/s, β and c. */
  viscous: Measured;
  quadratic: Measured;
  dry: Measured;
  /** How likely it is that each term acts, in [0, 1]. */
  chances: { viscous: number; quadratic: number; dry: number };
  /** Where a gate stands, from the lowest point to the side of the release, rad. */
  gateAngle: Measured | null;
}

/** A way to get periods out of a run. Pure; the id goes into the key of every analysis made with it. */
export interface Method {
  /** Name and version, like 'line-1'. */
  id: string;
  fit(view: RunView): Fit;
}
