import { describe, expect, test } from 'vitest';
import { noise } from '../../factories/noise';
import { flagsOf, namesOf } from '../../factories/flagged';
import { noisyRuns, SCENARIOS } from '../../factories/noisyRuns';
import { FAULTS } from '../../factories/plantedFaults';

const planted = (what: RegExp) => {
  const fault = FAULTS.find((one) => what.test(one.what))!;
  return fault.plant(noisyRuns(fault.scenario, 4)(), noise(1).uniform, fault.scenario.smallPeriod);
};

describe('drift', () => {
  test('is a pendulum at a gate that gets longer by 2 mm on a metre half way', () => {
    const [flag, ...others] = flagsOf(planted(/slips by 2 mm/));
    expect(others).toEqual([]);
    expect(flag).toMatchObject({ code: 'drift', mark: null });
    // 1 part in 1000 of 1.9 s; a kink taken for a bow shows it with another half.
    expect(flag!.seen.change_ms).toBeGreaterThan(1);
    expect(flag!.seen.change_ms).toBeLessThan(6);
  });

  test('is told with the size of the change, and bends down for one that gets shorter', () => {
    const run = planted(/slips by 2 mm/);
    if (run.capture.kind !== 'gate') throw new Error('not a gate');
    const end = run.capture.block_us.at(-1)![1];
    const sooner = (us: number) => Math.round(us - (0.004 * us * us) / end);
    const block_us = run.capture.block_us.map(([on, off]): [number, number] => [sooner(on), sooner(off)]);
    const shorter = flagsOf({ ...run, capture: { ...run.capture, block_us } });
    expect(shorter.map(({ code }) => code)).toEqual(['drift']);
    expect(shorter[0]!.seen.change_ms).toBeLessThan(-1);
  });

  test('is not the amplitude falling, by any law of damping, nor missing knowledge of it', () => {
    for (const scenario of SCENARIOS) {
      const run = noisyRuns(scenario, 5)();
      expect(namesOf(run)).not.toContain('drift');
      expect(namesOf({ ...run, amplitudes: [] })).not.toContain('drift');
    }
  });
});
