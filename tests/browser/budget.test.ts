import { gzipSync } from 'node:zlib';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { openDevice, PHONE, type Device } from '../support/chromium';
import { openSite, type Site } from './steps/arrange';

/** Design budget for what stands between a cold phone and the first tap. */
const PAD_BUDGET_BYTES = 170_000;

let site: Site;
let phone: Device;
beforeAll(async () => {
  site = await openSite();
  phone = await openDevice({ ...PHONE, serviceWorkers: 'block' });
});
afterAll(async () => {
  await phone?.dispose();
  await site?.dispose();
});

it('the pad can be used after at most 170 kB of gzipped JavaScript', async () => {
  const page = await phone.context.newPage();
  const scripts = new Map<string, number>();
  const reading: Promise<void>[] = [];
  page.on('response', (response) => {
    if (!new URL(response.url()).pathname.endsWith('.js')) return;
    reading.push(response.body().then((body) => void scripts.set(response.url(), gzipSync(body).length)));
  });
  await page.goto(`${site.url}/bench/pad`);
  await page.getByRole('button', { name: /^Tap once a swing/ }).waitFor();
  await page.waitForLoadState('networkidle');
  await Promise.all(reading);
  // What the pad fetches ahead for the run page does not stand before the first tap.
  const ahead = new Set(
    await page.evaluate(() =>
      performance.getEntriesByName('swaymark-pad-ready')[0]
        ? performance
            .getEntriesByType('resource')
            .filter(({ startTime }) => startTime > performance.getEntriesByName('swaymark-pad-ready')[0]!.startTime)
            .map(({ name }) => name)
        : [],
    ),
  );
  const needed = [...scripts].filter(([url]) => !ahead.has(url));
  const total = needed.reduce((sum, [, bytes]) => sum + bytes, 0);
  process.stdout.write(
    `JavaScript before the pad can be used: ${(total / 1000).toFixed(1)} kB gzip in ${needed.length} files\n`,
  );
  expect(needed.length).toBeGreaterThan(1);
  expect(total).toBeLessThanOrEqual(PAD_BUDGET_BYTES);
});
