/**
 * The schedules at length: `npm run faults` runs 10,000 from a seed of the day, which vitest prints with the
 * test's name. SCHEDULES and SEED change that; with the SEED and REPLAY_PATH of a failure it runs that one again.
 */
import { spawnSync } from 'node:child_process';

const { SCHEDULES = '10000', SEED = String(Math.floor(Date.now() / 86_400_000)) } = process.env;
const { status } = spawnSync('npx', ['vitest', 'run', '--project', 'faults', 'schedules'], {
  env: { ...process.env, SCHEDULES, SEED },
  stdio: 'inherit',
});
process.exit(status ?? 1);
