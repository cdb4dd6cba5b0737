import '../cheapHashes';
import { rmSync } from 'node:fs';
import fc from 'fast-check';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { commands } from './commands';
import { runSchedule } from './runSchedule';
import { loadTabCode, type TabCode } from './tabCode';
import { makeSchool, type School } from './template';

const total = Number(process.env.SCHEDULES ?? 500);
const firstSeed = Number(process.env.SEED ?? 20_260_302);
const path = process.env.REPLAY_PATH || undefined;
/** Each share in a test file of its own, so that they run side by side. */
export const SHARES = 2;

/**
 * The one property, over one share of the schedules. A failure prints seed, path and the shrunk schedule;
 * `SEED=… REPLAY_PATH=… npm run faults` plays it again.
 */
export function forAllSchedules(share: number): void {
  let code: TabCode;
  let school: School;
  beforeAll(async () => {
    [code, school] = await Promise.all([loadTabCode(), makeSchool()]);
  });
  afterAll(() => rmSync(school.dataDir, { recursive: true, force: true }));

  const seed = path === undefined ? firstSeed + share : firstSeed;
  const isAsked = path === undefined || share === 0;
  it.runIf(isAsked)(
    `whatever goes wrong, nothing is lost, doubled, changed or told to others (seed ${seed})`,
    { timeout: 4 * 3_600_000 },
    async () => {
      let done = 0;
      const property = fc.asyncProperty(fc.nat(), commands, async (randomness, schedule) => {
        await runSchedule(code, school, randomness, schedule);
        done += 1;
      });
      await fc.assert(property, {
        numRuns: Math.ceil(total / SHARES),
        seed,
        path,
        endOnFailure: process.env.SHRINK === 'no',
      });
      expect(done).toBeGreaterThan(0);
    },
  );
}
