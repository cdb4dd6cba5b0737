import { motionMethod } from '@shared/analysis/motionMethod';
import { coverageOf } from '../factories/coverage';
import { SCENARIOS } from '../factories/noisyRuns';

/**
 * How often the stated 95 % interval for T0 holds the truth, in noisy copies of each scenario, and how far
 * off T0 is against the spreadsheet's way (mean lap, release amplitude, first correction term). Wanted: 93 to 97
 * in 100, keyed totals at least 93, correlated taps at least 90; a quarter of the spreadsheet's error at 45° and
 * above, and never more than it. SEED and COPIES may be set in the environment.
 */
const copies = Number(process.env.COPIES ?? 2_000);
const seed = Number(process.env.SEED ?? 1);
console.log(`${copies} copies each, seed ${seed}`);
console.log('  held %  median |error|/T0  median u/T0  error against spreadsheet  scenario');
for (const scenario of SCENARIOS) {
  const { share, error, u, spreadsheetError } = coverageOf(motionMethod, scenario, copies, seed);
  const relative = (s: number) => (s / scenario.smallPeriod).toExponential(1);
  console.log(
    [
      (100 * share).toFixed(1).padStart(8),
      relative(error).padStart(19),
      relative(u).padStart(13),
      (error / spreadsheetError).toFixed(3).padStart(27),
      `  ${scenario.name}`,
    ].join(''),
  );
}
