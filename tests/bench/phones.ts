import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createApiClient } from '../server/helpers/apiClient';
import { must, PASSWORD } from '../server/helpers/people';
import { startProcess } from '../server/helpers/serverProcess';
import { crowd } from '../support/phoneCrowd';

/** 60 phones hand in 20 runs each at once to a server in a process of its own, while staff sign in. */
const PHONES = 60;
const RUNS_EACH = 20;
const EMAIL = 'lead@example.org';

const dataDir = mkdtempSync(join(tmpdir(), 'swaymark-phones-'));
const server = await startProcess({ DATA_DIR: dataDir, LOG_LEVEL: 'error' });
try {
  const client = createApiClient(server.url);
  const setUp = { token: server.setUpToken, name: 'Lead', email: EMAIL, password: PASSWORD };
  const lead = Object.assign(client, { me: must(await client.post('/api/set-up', setUp)).me });
  const seen = await crowd(server.url, lead, EMAIL, { phones: PHONES, runsEach: RUNS_EACH });
  const at = (times: number[], share: number) => times[Math.ceil(share * times.length) - 1]!;
  const [p50, p99] = [at(seen.handIns, 0.5), at(seen.handIns, 0.99)];
  const [signIn, before] = [seen.signIns.at(-1)!, at(seen.signInsBefore, 0.5)];
  console.log(`${PHONES} phones, ${RUNS_EACH} runs each: ${seen.failures.length} failures`);
  console.log(`hand-in: p50 ${p50.toFixed(0)} ms, p99 ${p99.toFixed(0)} ms (budget 2000)`);
  console.log(
    `sign-in meanwhile: slowest of ${seen.signIns.length} ${signIn.toFixed(0)} ms (budget 500), ` +
      `${(signIn / before).toFixed(1)} times that of a quiet server (${before.toFixed(0)} ms)`,
  );
  for (const failure of seen.failures.slice(0, 5)) console.log(failure);
  if (seen.failures.length > 0) process.exitCode = 1;
} finally {
  await server.end('SIGTERM');
  rmSync(dataDir, { recursive: true, force: true });
}
