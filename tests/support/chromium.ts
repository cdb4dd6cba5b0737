import { existsSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { chromium, type BrowserContext, type BrowserContextOptions } from 'playwright-core';

/** Chromium from CHROMIUM_PATH, else Debian's. Never a downloaded one. */
export function chromiumPath(): string {
  const path = process.env.CHROMIUM_PATH ?? '/usr/bin/chromium';
  if (!existsSync(path)) {
    throw new Error(`No Chromium at ${path}. Install Debian's package "chromium", or set CHROMIUM_PATH.`);
  }
  return path;
}

const ARGS = [
  '--headless',
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
  '--no-first-run',
];

export interface Device {
  context: BrowserContext;
  /** The profile folder: open it again with `openDevice({ profile })` after a kill. */
  profile: string;
  /** Ends the browser and removes its profile. */
  dispose: () => Promise<void>;
}

export const PHONE: BrowserContextOptions = {
  viewport: { width: 390, height: 844 },
  deviceScaleFactor: 2,
  hasTouch: true,
  isMobile: true,
};
export const LAPTOP: BrowserContextOptions = { viewport: { width: 1366, height: 768 } };
export const PROJECTOR: BrowserContextOptions = { viewport: { width: 1920, height: 1080 } };

/** A browser with a profile of its own, as one person's device. */
export async function openDevice(options: BrowserContextOptions & { profile?: string } = {}): Promise<Device> {
  const { profile = mkdtempSync(join(tmpdir(), 'swaymark-device-')), ...contextOptions } = options;
  const context = await chromium.launchPersistentContext(profile, {
    executablePath: chromiumPath(),
    args: ARGS,
    locale: 'en-GB',
    timezoneId: 'UTC',
    ...contextOptions,
  });
  return {
    context,
    profile,
    dispose: async () => {
      await context.close().catch(() => undefined);
      rmSync(profile, { recursive: true, force: true, maxRetries: 5, retryDelay: 200 });
    },
  };
}
