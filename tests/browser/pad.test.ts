import { readlinkSync } from 'node:fs';
import { join } from 'node:path';
import type { CDPSession, Page } from 'playwright-core';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { RawRun, TapCapture } from '@shared/schemas/run';
import { openDevice, PHONE, type Device } from '../support/chromium';
import { openSite, type Site } from './steps/arrange';
import { shootOnFailure } from './steps/shot';
import { Finger } from './steps/touch';

/** The pad under real input: what Chromium makes of touches and keys, and what then stands on disk. */

let site: Site;
let phone: Device;
let page: Page;
let cdp: CDPSession;
let finger: Finger;

beforeAll(async () => {
  site = await openSite({ isSetUp: false });
});
afterAll(() => site?.dispose());

beforeEach(async () => {
  shootOnFailure(() => page);
  phone = await openDevice(PHONE);
  await openPad();
});
afterEach(() => phone?.dispose());

const pad = () => page.getByRole('button', { name: /^Tap once a swing/ });

async function openPad(plan: { swings?: string } = {}) {
  page = await phone.context.newPage();
  cdp = await phone.context.newCDPSession(page);
  finger = await Finger.on(page);
  await page.goto(`${site.url}/bench/rig`);
  await page.getByLabel('Swings in the run').fill(plan.swings ?? '');
  await page.getByRole('button', { name: 'Go to the pad' }).click();
  await pad().waitFor();
}

/** Taps at these ms after the first, each given to the browser with its exact time. */
async function tapAt(times: number[], x = 200, y = 600): Promise<number> {
  const first = Date.now() + 50;
  for (const time of times) {
    const wait = first + time - Date.now();
    if (wait > 0) await page.waitForTimeout(wait);
    await finger.tap(x, y, (first + time) / 1000);
  }
  return first;
}

async function holdStop() {
  const stop = (await page.getByRole('button', { name: /^Stop/ }).boundingBox())!;
  await finger.hold(stop.x + stop.width / 2, stop.y + stop.height / 2, 950);
}

const count = (number: number) => page.getByRole('button', { name: `Tap once a swing, ${number}`, exact: true });

/** The capture of the newest run on disk, read past all of our code. */
async function captureOnDisk(): Promise<TapCapture> {
  await page.waitForURL('**/bench/runs/*');
  const raw = await page.evaluate(
    () =>
      new Promise<string>((resolve, reject) => {
        const opening = indexedDB.open('swaymark-guest');
        opening.onerror = () => reject(new Error('the store does not open'));
        opening.onsuccess = () => {
          const reading = opening.result.transaction('runs').objectStore('runs').getAll();
          reading.onsuccess = () => {
            opening.result.close();
            const rows = reading.result as { raw: string; created_seq: number }[];
            resolve(rows.sort((a, b) => b.created_seq - a.created_seq)[0]!.raw);
          };
        };
      }),
  );
  return (JSON.parse(raw) as RawRun).capture as TapCapture;
}

const nearTo = (marks: number[], wanted_ms: number[], within_us: number) =>
  marks.length === wanted_ms.length && marks.every((us, i) => Math.abs(us - wanted_ms[i]! * 1000) <= within_us);

describe('the tap pad', () => {
  it('keeps the time of the finger to the clock step while the page is busy for 250 ms at every tap', async () => {
    const times = [0, 620, 1240, 1860, 2480];
    await page.evaluate(() => {
      const busy = () => {
        const end = performance.now() + 250;
        while (performance.now() < end);
        setTimeout(busy, 60);
      };
      setTimeout(busy, 0);
    });
    await tapAt(times);
    await count(4).waitFor();
    await holdStop();
    const { mark_us, clock, events } = await captureOnDisk();
    expect(clock.step_us).toBeGreaterThan(0);
    expect(mark_us).toSatisfy((marks: number[]) => nearTo(marks, times, 2 * clock.step_us));
    expect(events.filter(({ kind }) => kind === 'clock_gap')).toEqual([]);
  });

  it('shows 0 on the first tap, counts a second finger beside a resting one, and keeps a palm and a bounce out', async () => {
    await cdp.send('Input.dispatchTouchEvent', { type: 'touchStart', touchPoints: [{ x: 80, y: 700, id: 1 }] });
    await count(0).waitFor();
    await page.waitForTimeout(500);
    const resting = { x: 80, y: 700, id: 1 };
    await cdp.send('Input.dispatchTouchEvent', {
      type: 'touchStart',
      touchPoints: [resting, { x: 250, y: 600, id: 2 }],
    });
    await cdp.send('Input.dispatchTouchEvent', { type: 'touchEnd', touchPoints: [resting] });
    await count(1).waitFor();
    await cdp.send('Input.dispatchTouchEvent', { type: 'touchEnd', touchPoints: [] });
    await page.waitForTimeout(400);
    const palm = { x: 200, y: 600, radiusX: 70, radiusY: 90 };
    await cdp.send('Input.dispatchTouchEvent', { type: 'touchStart', touchPoints: [palm] });
    await cdp.send('Input.dispatchTouchEvent', { type: 'touchEnd', touchPoints: [] });
    await page.locator('.pad-screen__done').getByText('Too broad for a fingertip').waitFor();
    await page.waitForTimeout(400);
    await tapAt([0, 45]);
    await count(2).waitFor();
    await page.locator('[aria-live]').getByText('Too soon after the last tap: not counted').waitFor();
    await holdStop();
    const { mark_us, rejected } = await captureOnDisk();
    expect(mark_us).toHaveLength(3);
    expect(rejected.map(({ why }) => why)).toEqual(['palm', 'bounce']);
  });

  it('is timed by keys alone: space taps, repeats are logged, U undoes, Enter twice on Stop ends', async () => {
    const key = (type: 'rawKeyDown' | 'keyUp', autoRepeat = false) =>
      cdp.send('Input.dispatchKeyEvent', { type, key: ' ', code: 'Space', windowsVirtualKeyCode: 32, autoRepeat });
    for (let i = 0; i < 3; i += 1) {
      await key('rawKeyDown');
      if (i === 1) await key('rawKeyDown', true);
      await key('keyUp');
      await page.waitForTimeout(400);
    }
    await page.keyboard.press('u');
    await count(1).waitFor();
    await page.keyboard.press('Space');
    await count(2).waitFor();
    await page.getByRole('button', { name: /^Stop/ }).focus();
    await page.keyboard.press('Enter');
    await page.keyboard.press('Enter');
    const { mark_us, rejected, inputs } = await captureOnDisk();
    expect(mark_us).toHaveLength(3);
    expect(inputs).toEqual(['key']);
    expect(rejected.map(({ why }) => why).sort()).toEqual(['key_repeat', 'undone']);
  });

  it('takes the last pass back at a touch of Undo, and notes a missed one without a time', async () => {
    await tapAt([0, 400, 800, 1200]);
    await count(3).waitFor();
    await page.getByRole('button', { name: 'Undo' }).tap();
    await page.getByText('3 taken back').first().waitFor();
    await page.getByRole('button', { name: 'Missed one' }).tap();
    await count(3).waitFor();
    await tapAt([400]);
    await count(4).waitFor();
    await holdStop();
    const { mark_us, missed } = await captureOnDisk();
    expect(mark_us).toHaveLength(4);
    expect(missed).toEqual([{ before_mark: 3, count: 1 }]);
  });

  it('goes on when the finger slides off Stop, and ends on a second press across the screen', async () => {
    await tapAt([0, 400, 800]);
    const stop = (await page.getByRole('button', { name: /^Stop/ }).boundingBox())!;
    const at = { x: stop.x + 20, y: stop.y + 20 };
    await cdp.send('Input.dispatchTouchEvent', { type: 'touchStart', touchPoints: [at] });
    await page.waitForTimeout(300);
    await cdp.send('Input.dispatchTouchEvent', { type: 'touchMove', touchPoints: [{ x: at.x + 150, y: at.y + 200 }] });
    await page.waitForTimeout(800);
    await cdp.send('Input.dispatchTouchEvent', { type: 'touchEnd', touchPoints: [] });
    await count(2).waitFor();
    await page.getByRole('button', { name: /^Stop/ }).tap();
    await page.waitForTimeout(200);
    await page.getByRole('button', { name: 'End it', exact: true }).tap();
    expect((await captureOnDisk()).ended).toBe('held');
  });

  it('stops by itself two seconds after the planned swing', async () => {
    await page.close();
    await openPad({ swings: '3' });
    await tapAt([0, 500, 1000, 1500]);
    await page.getByText('Tap on to go further', { exact: false }).first().waitFor();
    const { ended, mark_us } = await captureOnDisk();
    expect(ended).toBe('planned');
    expect(mark_us).toHaveLength(4);
  });

  it('is not left by the back gesture while a run is going, and says how to end it', async () => {
    await tapAt([0, 400, 800]);
    await page.evaluate(() => history.back());
    await page.getByText('Hold Stop to end it first', { exact: false }).waitFor();
    await count(2).waitFor();
    await tapAt([400]);
    await count(3).waitFor();
    await holdStop();
    expect((await captureOnDisk()).mark_us).toHaveLength(4);
  });

  it('writes down that the phone was turned, and changes no time', async () => {
    await tapAt([0, 400, 800]);
    await page.setViewportSize({ width: 844, height: 390 });
    await page.waitForTimeout(300);
    await tapAt([300, 700], 560, 200);
    await count(4).waitFor();
    await holdStop();
    const { events, mark_us } = await captureOnDisk();
    expect(mark_us).toHaveLength(5);
    expect(events).toMatchObject([{ kind: 'rotated', after_mark: 2 }]);
  });

  it('notices that storage was cleared under the run, writes all of it again, and says so', async () => {
    await tapAt([0, 400, 800, 1200]);
    await count(3).waitFor();
    await cdp.send('Storage.clearDataForOrigin', { origin: site.url, storageTypes: 'indexeddb' });
    await page.waitForTimeout(300);
    await tapAt([0, 400]);
    await count(5).waitFor();
    await holdStop();
    await page.getByText('Storage was cleared during the run').waitFor();
    await page.getByRole('button', { name: 'Go to the run' }).tap();
    expect((await captureOnDisk()).mark_us).toHaveLength(6);
  });

  it('lets only one tab record, and tells the other since when', async () => {
    await tapAt([0, 400]);
    const other = await phone.context.newPage();
    await other.goto(`${site.url}/bench/pad`);
    await other.getByText('A run is being timed in another tab').waitFor();
    await other.getByText(/It began at \d/).waitFor();
    await other.close();
    await page.bringToFront();
    await tapAt([300]);
    await count(2).waitFor();
  });

  it('offers what was tapped after the whole browser was killed, and keeps it as cut short', async () => {
    const times = Array.from({ length: 8 }, (_, n) => n * 350);
    await tapAt(times);
    await count(7).waitFor();
    const pid = Number(/\d+$/.exec(readlinkSync(join(phone.profile, 'SingletonLock')))![0]);
    process.kill(pid, 'SIGKILL');
    await page.waitForEvent('close').catch(() => undefined);

    phone = await openDevice({ ...PHONE, profile: phone.profile });
    page = await phone.context.newPage();
    await page.goto(`${site.url}/bench/pad`);
    await page.getByText('Run cut short at 7').waitFor();
    await page.getByRole('button', { name: 'Keep it' }).tap();
    const { ended, mark_us } = await captureOnDisk();
    expect(ended).toBe('cut_short');
    expect(mark_us).toSatisfy((marks: number[]) => nearTo(marks, times, 200));
  });
});
