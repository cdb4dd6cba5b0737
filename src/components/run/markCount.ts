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
