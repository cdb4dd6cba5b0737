import type { RawRun } from '@shared/schemas/run';

const DAY = { day: 'numeric', month: 'short' } as const;
const TIME = { hour: '2-digit', minute: '2-digit' } as const;

/** Day and time of the device that made the run, in its own zone at the time. */
export function madeAt({ wall_ms, zone_offset_min }: RawRun['made']): { time: string; day: string } {
  const local = wall_ms + zone_offset_min * 60_000;
  const part = (options: Intl.DateTimeFormatOptions) =>
    new Intl.DateTimeFormat('en-GB', { timeZone: 'UTC', ...options }).format(local);
  return { time: part(TIME), day: part({ ...DAY, year: 'numeric' }) };
}

/** Day and time here, for what the server or somebody else did. */
export function whenWords(wall_ms: number): string {
  return new Intl.DateTimeFormat('en-GB', { ...DAY, ...TIME }).format(wall_ms);
}
