import { join } from 'node:path';
import { readConfig } from '../config';
import { runUntilStopped } from '../runUntilStopped';
import { createDemo } from '../seed/createDemo';
import { printDemo } from '../seed/printDemo';
import { anyStaff } from '../services/staffAccounts';
import { startServer } from '../start';

/** The API alone, for `npm run dev`: pages come from Vite, which passes /api on to here. Seeded the first time. */
await runUntilStopped(async () => {
  const dataDir = join(process.env.DATA_DIR || 'data', 'dev');
  const config = readConfig({ ...process.env, NODE_ENV: 'development', DATA_DIR: dataDir }, { clientDir: null });
  const server = await startServer({ ...config, publicUrl: config.publicUrl ?? 'http://localhost:5173' });
  process.stdout.write(`API on ${server.url}, data and mails in ${config.dataDir}\n`);
  if (!(await anyStaff(server.deps))) printDemo(await createDemo(server.deps), server.deps);
  return server;
});
