import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { motionMethod } from '@shared/analysis/motionMethod';
import { quantile } from '@shared/statistics/quantile';
import { foldRun } from '@shared/timing/foldRun';
import { radians } from '@shared/units/angle';
import { noisyRuns, type Scenario } from '../factories/noisyRuns';

/** Median time of a full fit of 40 marks from 60°, and how many times as long scipy takes on the same runs. */
const scenario: Scenario = {
  ...{ name: '40 marks from 60°', smallPeriod: 1.7376, releaseDeg: 60, swings: 39 },
  damping: { viscous: 0.004, quadratic: 0, dry: 0 },
  how: { kind: 'tap', at: 'pass', swingsPerMark: 1, jitter: 0.035 },
  read: { swings: [0, 20, 39], u: 1 },
};
const WARM_UP = 300;
const MEASURED = 100;
const FOR_SCIPY = 3;

const next = noisyRuns(scenario, 1);
const views = Array.from({ length: MEASURED }, () => foldRun(next(), []));
for (let i = 0; i < WARM_UP; i += 1) motionMethod.fit(views[i % MEASURED]!);
const took = views.map((view) => {
  const start = performance.now();
  motionMethod.fit(view);
  return performance.now() - start;
});
const ours = quantile(took, 0.5);
console.log(`full fit, median of ${MEASURED}: ${ours.toFixed(2)} ms (least ${quantile(took, 0).toFixed(2)} ms)`);

const runs = views.slice(0, FOR_SCIPY).map((view) => ({
  times: view.marks.map((mark) => mark.time),
  readings: view.amplitudes.map(({ swing, as_read, u }) => ({
    swing,
    amplitude: as_read.form === 'angle' ? radians(as_read.mdeg / 1000) : 0,
    u: radians(u / 1000),
  })),
  jitter: 0.035,
}));
const script = fileURLToPath(new URL('./fitWithScipy.py', import.meta.url));
const child = spawnSync('python3', [script], { input: JSON.stringify(runs), encoding: 'utf8' });
if (child.status !== 0) console.log('scipy is not there (Debian: python3-scipy); the ratio is skipped');
else {
  const theirs = JSON.parse(child.stdout) as { seconds: number; period: number }[];
  const median =
    1000 *
    quantile(
      theirs.map((one) => one.seconds),
      0.5,
    );
  console.log(`scipy least_squares with solve_ivp, median of ${FOR_SCIPY}: ${median.toFixed(0)} ms`);
  console.log(`ratio: ${(median / ours).toFixed(0)} times`);
  theirs.forEach(({ period }, i) => {
    const { smallPeriod } = motionMethod.fit(views[i]!);
    console.log(`run ${i + 1}: T0 ${smallPeriod!.value.toFixed(5)} s here, ${period.toFixed(5)} s there`);
  });
}
