import { foldRun } from '@shared/timing/foldRun';
import type { RunView } from '@shared/timing/runView';
import type { RunEntry } from '@/stores/useRuns';

/** The run as it stands with its edits. */
export const viewOf = ({ raw, edits }: Pick<RunEntry, 'raw' | 'edits'>): RunView =>
  foldRun(
    raw,
    edits.map((edit) => edit.raw),
  );
