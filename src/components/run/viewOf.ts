import { foldRun } from '@shared/timing/foldRun';
import type { RunView } from '@shared/timing/runView';
import type { RunEntry } from '@/stores/useRuns';

/** The run as it stands with the edits that count. */
export const viewOf = ({ raw, counted }: Pick<RunEntry, 'raw' | 'counted'>): RunView =>
  foldRun(
    raw,
    counted.map((edit) => edit.raw),
  );
