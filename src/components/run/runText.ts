import type { RawRun } from '@shared/schemas/run';

/** Marks, splits or blocks in the raw run; a keyed total has none. */
export function markCount({ capture }: RawRun): number {
  switch (capture.kind) {
    case 'tap':
    case 'keyed_splits':
      return capture.mark_us.length;
    case 'gate':
      return capture.block_us.length;
    case 'keyed_total':
      return 0;
  }
}

/** Day and time on this device, for what the server or another person did. */
export function whenWords(wall_ms: number): string {
  return new Intl.DateTimeFormat('en-GB', {
    day: 'numeric',
    month: 'short',
    hour: '2-digit',
    minute: '2-digit',
  }).format(wall_ms);
}
