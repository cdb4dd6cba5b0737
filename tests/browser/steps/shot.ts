import { mkdirSync } from 'node:fs';
import type { Page } from 'playwright-core';
import { onTestFailed } from 'vitest';

/** When the running test fails, keeps what the page showed in tests/browser/shots (not in git). */
export function shootOnFailure(page: () => Page | undefined): void {
  onTestFailed(async ({ task }) => {
    const folder = 'tests/browser/shots';
    mkdirSync(folder, { recursive: true });
    const name = task.name.replace(/\W+/g, '-').slice(0, 60);
    await page()
      ?.screenshot({ path: `${folder}/${name}.png` })
      .catch(() => undefined);
  });
}
