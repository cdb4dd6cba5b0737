import './cheapHashes';
import { rmSync } from 'node:fs';
import fc from 'fast-check';
import { expect, it } from 'vitest';
import { commands } from './sim/commands';
import { runSchedule } from './sim/runSchedule';
import { loadTabCode } from './sim/tabCode';
import { makeSchool } from './sim/template';

it('a schedule takes the same course each time', async () => {
  const [code, school] = await Promise.all([loadTabCode(), makeSchool()]);
  for (const [i, schedule] of fc.sample(commands, { numRuns: 8, seed: 11 }).entries()) {
    const first = await runSchedule(code, school, i, schedule);
    expect(first.length).toBeGreaterThan(10);
    expect(await runSchedule(code, school, i, schedule)).toEqual(first);
  }
  rmSync(school.dataDir, { recursive: true, force: true });
});
