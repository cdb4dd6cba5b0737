import { readConfig } from './config';
import { runUntilStopped } from './runUntilStopped';
import { anyStaff, createSetUpLink } from './services/staffAccounts';
import { startServer } from './start';

await runUntilStopped(async () => {
  const config = readConfig(process.env);
  const server = await startServer(config);
  process.stdout.write(`Swaymark listens on ${server.url}, for browsers at ${server.deps.publicUrl}\n`);
  if (!(await anyStaff(server.deps))) {
    const link = await createSetUpLink(server.deps);
    process.stdout.write(
      `No staff account yet. Make the first coordinator here, once, within seven days:\n  ${link}\n`,
    );
  }
  return server;
});
