import { expect, it } from 'vitest';
import type { AmplitudeReading } from '@shared/schemas/rig';
import { amplitudeDraft } from '@/components/run/amplitudeDraft';

const at = (swing: number): AmplitudeReading => ({ swing, as_read: { form: 'angle', mdeg: 12_000 }, u: 500 });
const swings = (readings: AmplitudeReading[]) => readings.map((reading) => reading.swing);

it('readings pass unchanged when the first mark is in force', () => {
  const { readings, endSwing } = amplitudeDraft({ amplitudes: [at(0), at(20)], swings: 20 });
  expect(swings(readings)).toEqual([0, 20]);
  expect(endSwing).toBe(20);
});

it('a first mark left out moves readings back to where an edit counts from', () => {
  // The view counts from mark 1, so the reading at the start lies one swing before it.
  const { readings } = amplitudeDraft({ amplitudes: [at(-1), at(19)], swings: 19 });
  expect(swings(readings)).toEqual([0, 20]);
});

it('the end reading stays where it was read when the number of swings changes', () => {
  expect(amplitudeDraft({ amplitudes: [at(0), at(20)], swings: 21 }).endSwing).toBe(20);
});

it('without an end reading the end is the last swing', () => {
  expect(amplitudeDraft({ amplitudes: [at(0)], swings: 20 }).endSwing).toBe(20);
  expect(amplitudeDraft({ amplitudes: [], swings: null }).endSwing).toBeNull();
});
