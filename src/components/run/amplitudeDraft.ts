import type { AmplitudeReading } from '@shared/schemas/rig';
import type { RunView } from '@shared/timing/runView';

/**
 * Readings in force as an edit would state them. A view counts from the first mark in force, an edit
 * from the first raw mark: where that one was left out, a reading at the start lies before swing 0.
 *
 * @returns readings with swings of 0 or more, and the swing an end reading belongs to
 */
export function amplitudeDraft({ amplitudes, swings }: Pick<RunView, 'amplitudes' | 'swings'>): {
  readings: AmplitudeReading[];
  endSwing: number | null;
} {
  const before = Math.max(0, ...amplitudes.map(({ swing }) => -swing));
  const readings = amplitudes.map((reading) => ({ ...reading, swing: reading.swing + before }));
  const last = Math.max(0, ...readings.map(({ swing }) => swing));
  return { readings, endSwing: last > 0 ? last : swings === null ? null : swings + before };
}
