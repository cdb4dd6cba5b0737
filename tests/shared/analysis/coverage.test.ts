import { expect, test } from 'vitest';
import { analyseRun } from '@shared/analysis/analyseRun';
import { smallPeriodsElapsed } from '@shared/physics/meanPeriodRatio';
import { radians } from '@shared/units/angle';
import { noise } from '../../factories/noise';
import { angleReading, evenTimes, rawTapRun, sealed } from '../../factories/rawRuns';
import { timingCase } from '../../factories/timingCases';

/** One standard deviation of the share found is 0.6 in 100; over 4,000 runs it is 96.0 to 97.0. */
const RUNS = 1_000;

/** Share of seeded runs whose stated 95 % interval holds the true T0. */
function coverage(makeRun: (normal: () => number) => { run: ReturnType<typeof rawTapRun>; truth: number }): number {
  const { normal } = noise(1);
  let held = 0;
  for (let i = 0; i < RUNS; i += 1) {
    const { run, truth } = makeRun(normal);
    const { value, expanded_u } = analyseRun({ run: sealed(run), edits: [] }).small_period_s!;
    if (Math.abs(value - truth) <= expanded_u) held += 1;
  }
  return held / RUNS;
}

/** 20 swings from 20° falling exponentially by 0.4 % a swing, as in the reference case of a 1 m string. */
function twentySwings(normal: () => number, jitter: number, everyPass = false) {
  const truth = 2.0064;
  const step = everyPass ? 0.5 : 1;
  const swings = evenTimes(20 / step + 1, step);
  const last = 20 * Math.exp(-0.008 * 20);
  const curve = { from: 0, to: 20, first: radians(20), last: radians(last), law: 0 };
  const times = smallPeriodsElapsed(curve, swings).map((elapsed) => truth * elapsed + jitter * normal());
  const amplitudes = [angleReading(0, 20 + normal()), angleReading(20, last + normal())];
  return { run: rawTapRun({ times, amplitudes, capture: { swings_per_mark: step } }), truth };
}

test.each([
  { jitter: 0.035, everyPass: false },
  { jitter: 0.07, everyPass: false },
  { jitter: 0.035, everyPass: true },
])(
  '95 % intervals of a 20-swing run from 20° hold T0 92 to 98 times in 100: $jitter s, every pass $everyPass',
  (row) => {
    const share = coverage((normal) => twentySwings(normal, row.jitter, row.everyPass));
    expect(share).toBeGreaterThanOrEqual(0.92);
    expect(share).toBeLessThanOrEqual(0.98);
  },
  60_000,
);

test('the simulated run is the motion: its clean marks and the integrated case missed-two agree to 0.2 of a swing’s jitter', () => {
  // Marks of the case that carry no fault, against the same curve: 20° viscous with 0.4 % a second.
  const { run, smallPeriod } = timingCase('missed-two');
  const marks = run.capture.kind === 'tap' ? run.capture.mark_us.map((us) => us / 1e6) : [];
  const curve = { from: 0, to: 20, first: radians(20), last: radians(17.0012), law: 0 };
  const sixth = smallPeriod * smallPeriodsElapsed(curve, [0, 6])[1]!;
  expect(Math.abs(marks[6]! - sixth)).toBeLessThan(3 * Math.SQRT2 * 0.035);
});
