import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import type { Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createDemo, type Demo } from '../../server/seed/createDemo';
import { LAPTOP, openDevice, PHONE, PROJECTOR, type Device } from '../support/chromium';
import { openSite, type Site } from './steps/arrange';
import { comeBack, signIn } from './steps/doors';

/** Every screen, in both themes, against axe-core's rules for WCAG 2.2 A and AA and its best practices. */
const axeSource = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');

interface Violation {
  id: string;
  nodes: { target: string[]; html: string; failureSummary?: string }[];
}
declare const axe: { run: (options: unknown) => Promise<{ violations: Violation[] }> };

async function violationsOn(page: Page): Promise<string[]> {
  await page.evaluate(axeSource);
  const violations = await page.evaluate(async () => {
    const tags = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'];
    return (await axe.run({ runOnly: { type: 'tag', values: tags } })).violations;
  });
  return violations.flatMap(({ id, nodes }) =>
    nodes.map(({ target, html }) => `${id}: ${target.join(' ')} ${html.slice(0, 120)}`),
  );
}

describe('every screen', () => {
  let site: Site;
  let demo: Demo;
  const devices: Device[] = [];

  beforeAll(async () => {
    site = await openSite({ isSetUp: false });
    demo = await createDemo(site.server().running.deps);
  });
  afterAll(async () => {
    for (const device of devices) await device.dispose();
    await site?.dispose();
  });

  async function pageOn(options: Parameters<typeof openDevice>[0]): Promise<Page> {
    const device = await openDevice(options);
    devices.push(device);
    return device.context.newPage();
  }

  /** Opens an address, waits until it stands, and looks in both themes. */
  async function look(page: Page, path: string, ready: (page: Page) => Promise<unknown>): Promise<string[]> {
    const found: string[] = [];
    for (const colorScheme of ['light', 'dark'] as const) {
      await page.emulateMedia({ colorScheme, reducedMotion: 'reduce' });
      await page.goto(site.url + path);
      await ready(page);
      found.push(...(await violationsOn(page)).map((violation) => `${path} ${colorScheme} ${violation}`));
      const overflow = await page.evaluate(
        () => document.documentElement.scrollWidth - document.documentElement.clientWidth,
      );
      if (overflow > 1) found.push(`${path} ${colorScheme} is ${overflow} px wider than the screen`);
    }
    return found;
  }
  /** Opens all that folds on a run's sheet, the line over the strip and the terms of the budgets. */
  async function openFolds(page: Page): Promise<void> {
    await page.getByRole('region', { name: 'Result' }).waitFor();
    for (const summary of await page.locator('summary').all()) await summary.click();
    await page.getByRole('slider', { name: 'Walk along the marks on the motion' }).waitFor();
    await page.getByRole('slider', { name: 'Walk along the decay' }).press('ArrowRight');
    await page.getByRole('button', { name: 'Lay the plain line over it' }).click();
    for (const term of await page.locator('.budget__term').all()) await term.click();
    // An open one is called otherwise.
    const tables = page.getByRole('button', { name: 'Table', exact: true });
    while ((await tables.count()) > 0) await tables.first().click();
  }
  const heading = (page: Page) => page.getByRole('heading', { level: 1 }).first().waitFor({ state: 'attached' });

  it('before signing in has no violation', async () => {
    const page = await pageOn(PHONE);
    const token = 'A'.repeat(43);
    const paths = [
      '/',
      '/join',
      `/join/${demo.classes[0]!.code}`,
      '/return',
      '/sign-in',
      '/forgot',
      `/set-up/${token}`,
    ];
    paths.push(
      `/invite/${token}`,
      `/reset/${token}`,
      '/settings',
      '/bench',
      '/bench/rig',
      '/bench/plan',
      '/bench/pad',
      '/bench/key-in',
    );
    paths.push('/bench/gate', '/hand-in', '/no/such/page', '/bench/runs/0199d5a0-0000-7000-8000-000000000000');
    const found: string[] = [];
    for (const path of paths) found.push(...(await look(page, path, heading)));
    expect(found).toEqual([]);
  });

  it('of keying in has no violation wherever it is scrolled to', async () => {
    const page = await pageOn(PHONE);
    const half = async () => {
      const keep = page.getByRole('button', { name: /^Keep/ });
      await keep.waitFor();
      await keep.evaluate((button) => {
        const { top, height } = button.getBoundingClientRect();
        window.scrollBy(0, top + height / 2 - (window.innerHeight - 60));
      });
    };
    expect(await look(page, '/bench/key-in', half)).toEqual([]);
  });

  it('of a student with runs has no violation', async () => {
    const page = await pageOn(PHONE);
    const found: string[] = [];
    for (const student of [demo.students[1]!, demo.students[4]!]) {
      await page.goto(site.url);
      await page.evaluate(() =>
        fetch('/api/sign-out', {
          method: 'POST',
          headers: { 'X-Swaymark': '1', 'Content-Type': 'application/json' },
          body: '{}',
        }),
      );
      await comeBack(page, site.url, student);
      const run = page.locator('a[href*="/bench/runs/"]').first();
      await run.waitFor();
      const path = await run.getAttribute('href');
      found.push(...(await look(page, '/bench', async () => run.waitFor())));
      found.push(...(await look(page, path!, async () => page.getByRole('region', { name: 'Result' }).waitFor())));
      found.push(...(await look(page, path!, openFolds)));
      found.push(...(await look(page, '/hand-in', heading)));
    }
    expect(found).toEqual([]);
  });

  it('of a plan with the planner beside it has no violation', async () => {
    const page = await pageOn(PHONE);
    const beside = async () => {
      await page.getByText('Is this plan good enough?').click();
      await page.getByRole('button', { name: /^Use \d+ swings$/ }).waitFor();
      await page.getByRole('slider', { name: 'Walk along the forecast' }).waitFor();
    };
    expect(await look(page, '/bench/rig', beside)).toEqual([]);
  });

  it('of the Desk has no violation', async () => {
    const page = await pageOn(LAPTOP);
    await signIn(page, site.url, 'teacher@example.org', demo.password);
    const found = await look(page, '/desk', async () => page.getByText('Physics 10 blue').first().waitFor());
    await page
      .getByRole('link', { name: /Physics 10 blue/ })
      .first()
      .click();
    await page.waitForURL('**/desk/classes/*');
    const classPath = new URL(page.url()).pathname;
    const firstRun = page.locator('a[href*="/desk/runs/"]').first();
    found.push(...(await look(page, classPath, async () => firstRun.waitFor())));
    const runPath = await firstRun.getAttribute('href');
    found.push(...(await look(page, runPath!, async () => page.getByRole('region', { name: 'Result' }).waitFor())));
    expect(found).toEqual([]);
  });

  it('of people has no violation', async () => {
    const page = await pageOn(LAPTOP);
    await signIn(page, site.url, 'coordinator@example.org', demo.password);
    expect(
      await look(page, '/desk/people', async () => page.getByText('volunteer@example.org').first().waitFor()),
    ).toEqual([]);
  });

  it('of the Board keeps picture and words apart at every text size, on one projector screen', async () => {
    const page = await pageOn(PROJECTOR);
    await page.goto(`${site.url}/board/${demo.classes[0]!.board_pass}`);
    await page.locator('.dot-plot canvas').waitFor();
    for (const step of [0, 1, 2, 3, 4, 5]) {
      if (step > 0) await page.locator('main').press('+');
      await page.waitForTimeout(300);
      const seen = await page.evaluate(() => {
        const box = (name: string) => document.querySelector(name)!.getBoundingClientRect();
        return {
          apart: box('.board-foot').top - box('.dot-plot').bottom,
          picture: box('.dot-plot').height / innerHeight,
          tooHigh: document.documentElement.scrollHeight - innerHeight,
        };
      });
      expect([step, seen.apart >= 0, seen.picture > 0.3, seen.tooHigh <= 0, seen]).toEqual([
        step,
        true,
        true,
        true,
        seen,
      ]);
    }
  });

  it('of the Board has no violation', async () => {
    const page = await pageOn(PROJECTOR);
    const found = await look(page, `/board/${demo.classes[0]!.board_pass}`, async () =>
      page.getByText('Physics 10 blue').first().waitFor(),
    );
    found.push(...(await look(page, '/board/not-a-pass', heading)));
    expect(found).toEqual([]);
  });
});
