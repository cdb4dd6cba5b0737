import { build, type Rolldown } from 'vite';
import { quantile } from '@shared/statistics/quantile';
import { noisyRuns } from '../factories/noisyRuns';
import { sealed } from '../factories/rawRuns';
import { openDevice, PHONE } from '../support/chromium';

/**
 * Time of a whole analysis of 40 marks from 60° in Chromium at 4× CPU throttle, median of so many. Wanted: at most
 * 60 ms, or it has to leave the main thread.
 */
const RUNS = 25;
const WARM_UP = 5;

const next = noisyRuns(
  {
    ...{ name: '40 marks from 60°', smallPeriod: 1.7376, releaseDeg: 60, swings: 39 },
    damping: { viscous: 0.004, quadratic: 0, dry: 0 },
    how: { kind: 'tap', at: 'pass', swingsPerMark: 1, jitter: 0.035 },
    read: { swings: [0, 20, 39], u: 1 },
  },
  1,
);
const inputs = Array.from({ length: RUNS }, () => ({ run: sealed(next()), edits: [] }));
const built = (await build({
  logLevel: 'error',
  configFile: false,
  resolve: { alias: { '@shared': 'shared' } },
  build: {
    write: false,
    target: 'es2022',
    lib: { entry: 'tests/browser/steps/analyseInPage.ts', formats: ['iife'], name: 'inPage' },
  },
})) as unknown as Rolldown.RolldownOutput[];

const phone = await openDevice(PHONE);
try {
  const page = await phone.context.newPage();
  const cdp = await phone.context.newCDPSession(page);
  await page.addScriptTag({ content: built[0]!.output[0].code });
  await cdp.send('Emulation.setCPUThrottlingRate', { rate: 4 });
  const took = await page.evaluate((given) => {
    const { analyse } = (globalThis as unknown as { inPage: { analyse: (input: unknown) => string } }).inPage;
    return given.map((input) => {
      const start = performance.now();
      analyse(input);
      return performance.now() - start;
    });
  }, inputs);
  const warm = took.slice(WARM_UP);
  console.log(
    `whole analysis at 4× throttle: first ${took[0]!.toFixed(0)} ms, then median ${quantile(warm, 0.5).toFixed(0)} ms, least ${quantile(warm, 0).toFixed(0)} ms`,
  );
} finally {
  await phone.dispose();
}
