import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { readConfig } from '../config';
import { runUntilStopped } from '../runUntilStopped';
import { createDemo } from '../seed/createDemo';
import { printDemo } from '../seed/printDemo';
import { startServer } from '../start';

/** The whole program on a throw-away database: gone when it ends. */
await runUntilStopped(async () => {
  const dataDir = mkdtempSync(join(tmpdir(), 'swaymark-demo-'));
  process.once('exit', () => rmSync(dataDir, { recursive: true, force: true }));
  const config = readConfig(process.env, {
    mode: 'demo',
    dataDir,
    mail: { kind: 'sink', from: 'Swaymark demo <demo@localhost>' },
  });
  const server = await startServer({ ...config, logLevel: process.env.LOG_LEVEL ? config.logLevel : 'warn' });
  printDemo(await createDemo(server.deps), server.deps);
  return server;
});
