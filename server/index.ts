import { readConfig } from './config';
import type { Deps } from './deps';
import { runUntilStopped } from './runUntilStopped';
import { anyStaff, createSetUpLink } from './services/staffAccounts';
import { startServer } from './start';

await runUntilStopped(async () => {
  const server = await startServer(readConfig(process.env));
  const where = `Swaymark listens on ${server.url}, for browsers at ${server.deps.publicUrl}\n`;
  process.stdout.write(where + (await firstSteps(server.deps)));
  return server;
});

/** While there is no staff account, each start gives a fresh link and the ones before stop working. */
async function firstSteps(deps: Deps): Promise<string> {
  if (await anyStaff(deps)) return '';
  return `No staff account yet. Make the first coordinator here, once, within seven days:\n  ${await createSetUpLink(deps)}\n`;
}
