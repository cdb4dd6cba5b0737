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
  missing: (typeof MISSING)[number][];
}

/** A way to get periods out of a run. Pure; the id goes into the key of every analysis made with it. */
export interface Method {
  /** Name and version, like 'line-1'. */
  id: string;
  fit(view: RunView): Fit;
}
