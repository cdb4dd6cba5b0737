import { describe, expect, test } from 'vitest';
import { motionMethod } from '@shared/analysis/motionMethod';
import { coverageOf } from '../../factories/coverage';
import { SCENARIOS } from '../../factories/noisyRuns';

/** `npm run bench -- coverage` does the same with 2,000 copies and prints the shares. */
const COPIES = 200;
/** What is wanted is 93 to 97 in 100; three standard deviations of a share of 200 copies are added below. */
const LEAST = 0.93 - 3 * Math.sqrt((0.93 * 0.07) / COPIES);
const LEAST_CORRELATED = 0.9 - 3 * Math.sqrt((0.9 * 0.1) / COPIES);

describe.each(SCENARIOS)('$name', (scenario) => {
  const found = coverageOf(motionMethod, scenario, COPIES, 2);

  test('95 % intervals hold T0 often enough, and are not idle: u is at most 2.2 times the median error', () => {
    const isCorrelated = scenario.how.kind === 'tap' && scenario.how.lag1;
    expect(found.share).toBeGreaterThanOrEqual(isCorrelated ? LEAST_CORRELATED : LEAST);
    // The median of |error| is 0.67 u when u is right; its own spread over 200 copies is a tenth.
    expect(found.u).toBeLessThan(2.2 * found.error);
  });

  test('is nearer to T0 than the spreadsheet, four times nearer from 45° on', () => {
    const isKeyed = scenario.how.kind === 'keyed';
    // One reading of a stopwatch is what it is: there only the amplitude can be done better.
    const most = isKeyed ? 1.05 : scenario.releaseDeg >= 45 ? 0.25 : 1;
    expect(found.error).toBeLessThanOrEqual(most * found.spreadsheetError);
  });
});
