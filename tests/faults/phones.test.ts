import { expect, it } from 'vitest';
import { signInCoordinator } from '../server/helpers/people';
import { startServer } from '../support/startServer';
import { crowd } from '../support/phoneCrowd';

it('R20: 24 phones hand in 10 runs each at once while staff sign in, and every run is stored', async () => {
  const server = await startServer();
  try {
    const lead = await signInCoordinator(server);
    const { failures, handIns, signIns } = await crowd(server.url, lead, 'lead@example.org', {
      phones: 24,
      runsEach: 10,
    });
    expect(failures).toEqual([]);
    expect(handIns).toHaveLength(24);
    expect(signIns.length).toBeGreaterThan(0);
    const [held] = await server.running.deps.database.select<{ runs: number }>('SELECT count(*) AS runs FROM runs', []);
    expect(held!.runs).toBe(240);
  } finally {
    await server.stop();
  }
});
