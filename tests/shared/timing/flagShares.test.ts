import { expect, test } from 'vitest';
import { FLAG_CODES } from '@shared/schemas/edit';
import { detections, falseAlarms, FAULTS } from '../../factories/flagShares';
import { SCENARIOS } from '../../factories/noisyRuns';

/** `npm run bench -- flags` does the same with more copies and prints the shares. */
const COPIES = 60;

test('no flag is raised on more than one clean noisy run in two hundred, over all scenarios', () => {
  const shares = SCENARIOS.map((scenario, i) => ({ scenario, found: falseAlarms(scenario, COPIES, 20 + i) }));
  for (const code of FLAG_CODES) {
    const isPlanted = ({ how }: (typeof SCENARIOS)[number]) =>
      code === 'off_centre' && how.kind === 'gate' && how.offCentreDeg !== 0;
    const clean = shares.filter(({ scenario }) => !isPlanted(scenario)).map(({ found }) => found);
    const runs = clean.reduce((sum, one) => sum + one.runs, 0);
    const raised = clean.reduce((sum, one) => sum + one.raised[code], 0);
    // Three standard deviations of a share of so many runs are allowed above it.
    expect([code, raised / runs < 0.005 + 3 * Math.sqrt((0.005 * 0.995) / runs)]).toEqual([code, true]);
  }
}, 240_000);

test.each(FAULTS.map((fault) => ({ ...fault, name: `${fault.code}: ${fault.what}` })))(
  '$name is found',
  (fault) => {
    const copies = 20;
    const { raised } = detections(fault, copies, 9);
    // The faults are planted so large that the bench finds 60 % or more of them; three standard deviations below that.
    expect(raised[fault.code] / copies).toBeGreaterThan(0.6 - 3 * Math.sqrt((0.6 * 0.4) / copies));
  },
  60_000,
);
