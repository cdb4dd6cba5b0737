import type { Method } from '@shared/analysis/method';
import { stateResult } from '@shared/analysis/stateResult';
import { quantile } from '@shared/statistics/quantile';
import { foldRun } from '@shared/timing/foldRun';
import { radians } from '@shared/units/angle';
import { noisyRuns, type Scenario } from './noisyRuns';

export interface Coverage {
  /** Share of copies whose stated 95 % interval holds the true T0. */
  share: number;
  /** Median of |T0 found − T0|, s, and of the stated standard uncertainty. */
  error: number;
  u: number;
  /** Median error of the mean lap divided by 1 + A²/16 at the release. */
  spreadsheetError: number;
}

/** How often a method's intervals hold the truth in noisy copies of a scenario. */
export function coverageOf(method: Method, scenario: Scenario, copies: number, seed: number): Coverage {
  const next = noisyRuns(scenario, seed);
  let held = 0;
  const errors: number[] = [];
  const us: number[] = [];
  const spreadsheet: number[] = [];
  for (let i = 0; i < copies; i += 1) {
    const view = foldRun(next(), []);
    const { smallPeriod } = method.fit(view);
    const result = stateResult(smallPeriod!.value, smallPeriod!.shares)!;
    const error = Math.abs(result.value - scenario.smallPeriod);
    if (error <= result.expanded_u) held += 1;
    errors.push(error);
    us.push(result.u);
    const read = view.amplitudes[0]!.as_read;
    const release = read.form === 'angle' ? radians(read.mdeg / 1000) : 0;
    spreadsheet.push(Math.abs(view.duration / view.swings! / (1 + release ** 2 / 16) - scenario.smallPeriod));
  }
  const median = (values: number[]) => quantile(values, 0.5);
  return { share: held / copies, error: median(errors), u: median(us), spreadsheetError: median(spreadsheet) };
}
