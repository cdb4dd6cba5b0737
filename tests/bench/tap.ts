import { openDevice, PHONE } from '../support/chromium';
import { openSite } from '../browser/steps/arrange';

/**
 * A tap at 4× CPU throttle in the built client: until it is painted and until it is on disk. Beside each tap
 * the bare browser is timed in the same run: its next frame, and one row into a database of its own.
 */
const TAPS = 40;

declare global {
  interface Window {
    seen: Record<'shown' | 'frame' | 'written' | 'bare', number[]>;
  }
}

const site = await openSite({ isSetUp: false });
const phone = await openDevice(PHONE);
try {
  const page = await phone.context.newPage();
  const cdp = await phone.context.newCDPSession(page);
  await page.goto(`${site.url}/bench/pad`);
  await page.getByRole('button', { name: /^Tap once a swing/ }).waitFor();
  await page.waitForLoadState('networkidle');
  await page.evaluate(async () => {
    const bare = await new Promise<IDBDatabase>((resolve) => {
      const opening = indexedDB.open('bare');
      opening.onupgradeneeded = () => opening.result.createObjectStore('rows', { autoIncrement: true });
      opening.onsuccess = () => resolve(opening.result);
    });
    window.seen = { shown: [], frame: [], written: [], bare: [] };
    let tappedAt = 0;
    const since = (times: number[], from: number) => times.push(performance.now() - from);
    const add = IDBObjectStore.prototype.add;
    IDBObjectStore.prototype.add = function (...args) {
      const from = tappedAt;
      this.transaction.addEventListener('complete', () => since(window.seen.written, from));
      return add.apply(this, args);
    };
    const onTap = ({ timeStamp }: PointerEvent) => {
      tappedAt = timeStamp;
      requestAnimationFrame(() => setTimeout(() => since(window.seen.frame, timeStamp)));
      const transaction = bare.transaction('rows', 'readwrite');
      add.call(transaction.objectStore('rows'), { at_ms: timeStamp });
      transaction.addEventListener('complete', () => since(window.seen.bare, timeStamp));
    };
    addEventListener('pointerdown', onTap, { capture: true });
    new MutationObserver(() => setTimeout(() => since(window.seen.shown, tappedAt))).observe(
      document.querySelector('.pad-screen__face')!,
      { subtree: true, childList: true, characterData: true },
    );
  });
  await cdp.send('Emulation.setCPUThrottlingRate', { rate: 4 });
  for (let n = 0; n <= TAPS; n += 1) {
    await cdp.send('Input.dispatchTouchEvent', { type: 'touchStart', touchPoints: [{ x: 200, y: 600 }] });
    await cdp.send('Input.dispatchTouchEvent', { type: 'touchEnd', touchPoints: [] });
    await page.waitForTimeout(300);
  }
  const seen = await page.evaluate(() => window.seen);
  const p95 = (times: number[]) => [...times].sort((a, b) => a - b)[Math.floor(0.95 * (times.length - 1))]!;
  const say = (what: string, ours: number[], bare: number[]) =>
    console.log(
      `${what}: p95 ${p95(ours).toFixed(0)} ms, ${(p95(ours) / p95(bare)).toFixed(2)} times the bare browser's`,
    );
  say('painted', seen.shown, seen.frame);
  say('on disk', seen.written.slice(1), seen.bare);
} finally {
  await phone.dispose();
  await site.dispose();
}
