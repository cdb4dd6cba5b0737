import type { Page } from 'playwright-core';
import { afterAll, beforeAll, beforeEach, expect, it } from 'vitest';
import { openDevice, PHONE, type Device } from '../support/chromium';
import { MOODS, startFlappingProxy, type FlappingProxy } from '../support/flappingProxy';
import { makeClass, openSite, type Site } from './steps/arrange';
import { shootOnFailure } from './steps/shot';
import { Finger, tapAlong } from './steps/touch';

const RUNS = 4;

let site: Site;
let proxy: FlappingProxy;
let phone: Device;
let page: Page;

beforeAll(async () => {
  site = await openSite();
  proxy = await startFlappingProxy(Number(new URL(site.url).port));
  phone = await openDevice(PHONE);
  page = await phone.context.newPage();
});
afterAll(async () => {
  await phone?.dispose();
  await proxy?.close();
  await site?.dispose();
});
beforeEach(() => shootOnFailure(() => page));

it('runs timed while the network flaps all arrive, each once, byte for byte', async () => {
  const { code } = await makeClass(site);
  await page.goto(`${proxy.url}/join/${code}`);
  await page.getByRole('group', { name: 'Bench' }).getByText('3', { exact: true }).click();
  await page.getByLabel('Nickname or roster number').fill('Otter');
  await page.getByRole('button', { name: 'Join', exact: true }).click();
  await page.getByRole('button', { name: 'I wrote it down' }).click();
  await page.waitForURL('**/bench');
  await page.evaluate(() => navigator.serviceWorker.ready.then(() => true));

  proxy.flap(MOODS);
  for (let n = 0; n < RUNS; n += 1) {
    await page.goto(`${proxy.url}/bench/pad`);
    await page.getByRole('button', { name: /^Tap once a swing/ }).waitFor();
    await tapAlong(page, [0, 1, 2.01]);
    const stop = (await page.getByRole('button', { name: /^Stop/ }).boundingBox())!;
    await (await Finger.on(page)).hold(stop.x + stop.width / 2, stop.y + stop.height / 2, 1_000);
    await page.waitForURL('**/bench/runs/*');
    await comesAndGoes(page);
  }
  for (let n = 0; n < 20 && Object.values(proxy.met).includes(0); n += 1) await comesAndGoes(page);
  expect(Object.values(proxy.met)).not.toContain(0);

  proxy.flap(null);
  await expect
    .poll(async () => (await runsOnPhone(page)).map(({ state }) => state), { timeout: 20_000, interval: 500 })
    .toEqual(Array.from({ length: RUNS }, () => 'received'));
  const onPhone = (await runsOnPhone(page)).map(({ id, digest, raw }) => ({ id, digest, raw }));
  const held = await site
    .server()
    .running.deps.database.select<{ id: string }>('SELECT id, digest, raw FROM runs ORDER BY id', []);
  expect(held).toEqual(onPhone);
});

/** The system says that the network is back, as it does again and again where it comes and goes. */
async function comesAndGoes(on: Page): Promise<void> {
  await on.evaluate(() => window.dispatchEvent(new Event('online')));
  await on.waitForTimeout(400);
}

interface KeptRun {
  id: string;
  digest: string;
  raw: string;
  state: string;
}

/** The runs in the one account's store of this phone, in the order of their ids. */
function runsOnPhone(on: Page): Promise<KeptRun[]> {
  return on.evaluate(async () => {
    window.dispatchEvent(new Event('online'));
    const { name } = (await indexedDB.databases()).find((one) => one.name!.startsWith('swaymark-student-'))!;
    const asked = <T>(request: IDBRequest<T>) =>
      new Promise<T>((resolve, reject) => {
        request.onsuccess = () => resolve(request.result);
        request.onerror = () => reject(request.error);
      });
    const database = await asked(indexedDB.open(name!));
    const rows = await asked<KeptRun[]>(database.transaction('runs').objectStore('runs').getAll());
    database.close();
    return rows;
  });
}
