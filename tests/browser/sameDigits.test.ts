import { build, type Rolldown } from 'vite';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { analyseRun } from '@shared/analysis/analyseRun';
import { canonicalText } from '@shared/schemas/canonical';
import { sealed } from '../factories/rawRuns';
import { timingCase } from '../factories/timingCases';
import file from '../reference/timing-cases.json';
import { openDevice, type Device } from '../support/chromium';

/** Chromium and Node do not share one V8. Whatever is printed must not depend on which of them worked it out. */
describe('an analysis made in Chromium', () => {
  let device: Device;
  let code: string;

  beforeAll(async () => {
    const built = (await build({
      logLevel: 'error',
      configFile: false,
      resolve: { alias: { '@shared': 'shared' } },
      build: {
        write: false,
        minify: false,
        lib: { entry: 'tests/browser/steps/analyseInPage.ts', formats: ['iife'], name: 'inPage' },
      },
    })) as unknown as Rolldown.RolldownOutput[];
    code = built[0]!.output[0].code;
    device = await openDevice();
  });
  afterAll(() => device?.dispose());

  it.each(file.cases.map(({ id }) => id))('has every digit of that made in Node: %s', async (id) => {
    const input = { run: sealed(timingCase(id).run), edits: [] };
    const page = await device.context.newPage();
    await page.addScriptTag({ content: code });
    const inChromium = await page.evaluate(
      (given) => (globalThis as unknown as { inPage: { analyse: (given: unknown) => string } }).inPage.analyse(given),
      input,
    );
    await page.close();
    expect(inChromium).toBe(canonicalText(analyseRun(input)));
  });
});
