import type { Jitters } from './jitters';
import type { Linear } from './linearise';
import type { Slopes } from './motionSlopes';
import type { Places } from './motionUnknowns';
import type { MotionEvent, Prediction } from './predictMotion';

/** A motion through the data, and what its uncertainty needs. */
export interface MotionFit extends Jitters, Pick<Linear, 'covariance' | 'within' | 'chances' | 'blockWeights'> {
  event: MotionEvent;
  places: Places;
  rates: [number, number, number];
  /** The swing the motion was released at. */
  from: number;
  values: number[];
  prediction: Prediction;
  slopes: Slopes;
  /** Observed minus calculated, s. */
  residuals: number[];
  /** −2 log of how likely the data are, but for a constant. */
  unlikeliness: number;
  /** Marks less what the unknowns have taken from them. */
  free: number;
  path: 'averaged' | 'integrated';
  converged: boolean;
}
