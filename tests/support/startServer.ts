import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { readConfig, type Config } from '../../server/config';
import { keptMails } from '../../server/mail/mailSink';
import { createSetUpLink } from '../../server/services/staffAccounts';
import { startServer as start, type RunningServer } from '../../server/start';

export interface TestServer {
  url: string;
  dataDir: string;
  running: RunningServer;
  /** Texts of the mails sent so far, oldest first. */
  mails(): Promise<string[]>;
  /** A link that makes the first coordinator. */
  setUpToken(): Promise<string>;
  /** Stops the server, and removes its data unless the folder was given. */
  stop(): Promise<void>;
}

/**
 * The real application on a free port of 127.0.0.1, with a data folder of its own.
 *
 * @param overrides  any part of the configuration; `clientDir: null` and quiet logs by default
 * @param now        a clock in place of the wall clock
 */
export async function startServer(overrides: Partial<Config> = {}, now?: () => number): Promise<TestServer> {
  const dataDir = overrides.dataDir ?? mkdtempSync(join(tmpdir(), 'swaymark-test-'));
  const config = readConfig({}, { mode: 'test', port: 0, logLevel: 'silent', clientDir: null, ...overrides, dataDir });
  const running = await start(config, now);
  return {
    url: running.url,
    dataDir,
    running,
    mails: () => keptMails(dataDir),
    setUpToken: async () => (await createSetUpLink(running.deps)).split('/').at(-1)!,
    async stop() {
      await running.stop();
      if (!overrides.dataDir) rmSync(dataDir, { recursive: true, force: true });
    },
  };
}
