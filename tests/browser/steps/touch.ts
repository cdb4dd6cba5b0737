import type { CDPSession, Page } from 'playwright-core';

/** A finger on the screen, as the browser gets it from a touch panel: trusted events with a time of their own. */
export class Finger {
  private constructor(private readonly cdp: CDPSession) {}

  static async on(page: Page): Promise<Finger> {
    return new Finger(await page.context().newCDPSession(page));
  }

  /** @param at_s  time of the contact, seconds since 1970 */
  async tap(x: number, y: number, at_s: number): Promise<void> {
    const point = { x, y, radiusX: 6, radiusY: 6, force: 0.5 };
    await this.cdp.send('Input.dispatchTouchEvent', { type: 'touchStart', touchPoints: [point], timestamp: at_s });
    await this.cdp.send('Input.dispatchTouchEvent', { type: 'touchEnd', touchPoints: [], timestamp: at_s + 0.04 });
  }

  async hold(x: number, y: number, ms: number): Promise<void> {
    await this.cdp.send('Input.dispatchTouchEvent', { type: 'touchStart', touchPoints: [{ x, y }] });
    await new Promise((done) => setTimeout(done, ms));
    await this.cdp.send('Input.dispatchTouchEvent', { type: 'touchEnd', touchPoints: [] });
  }
}

/** Taps at these seconds after the first, in real time, each with its exact time. */
export async function tapAlong(page: Page, marks_s: readonly number[]): Promise<void> {
  const finger = await Finger.on(page);
  const { width, height } = page.viewportSize()!;
  const first_s = Date.now() / 1000 + 0.3;
  for (const mark_s of marks_s) {
    const wait = (first_s + mark_s) * 1000 - Date.now();
    if (wait > 0) await new Promise((done) => setTimeout(done, wait));
    await finger.tap(width / 2, height * 0.7, first_s + mark_s);
  }
}
