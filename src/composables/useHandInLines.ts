import { computed } from 'vue';
import type { EditRow, RunRow } from '@/db/localStore';
import { useRuns, type RunEntry } from '@/stores/useRuns';

/** A run or an edit on its way to the server. */
export interface HandInLine {
  type: 'run' | 'edit';
  row: RunRow | EditRow;
  /** The run it is, or is about. */
  entry: RunEntry;
  /** Kind of capture for a run, kind of change for an edit. */
  kind: string;
}

/** Everything made on this device, by where it stands: refused, waiting (next to go first), received (newest first). */
export function useHandInLines() {
  const runs = useRuns();
  const mine = computed(() => runs.entries.flatMap(linesOf).filter(({ row }) => row.origin === 'mine'));
  const standing = (state: HandInLine['row']['state']) => mine.value.filter(({ row }) => row.state === state);
  return {
    isLoaded: computed(() => runs.isLoaded),
    refused: computed(() => standing('refused').sort(byMade)),
    waiting: computed(() => standing('waiting').sort(byMade)),
    received: computed(() => standing('received').sort((a, b) => byMade(b, a))),
    /** Made on this device too, wherever they stand. */
    unreadable: computed(() => runs.unreadable.filter(({ row }) => row.origin === 'mine')),
  };
}

const linesOf = (entry: RunEntry): HandInLine[] => [
  { type: 'run', row: entry.row, entry, kind: entry.raw.capture.kind },
  ...entry.edits.map(({ row, raw }) => ({ type: 'edit' as const, row, entry, kind: raw.change.kind })),
];

const byMade = (a: HandInLine, b: HandInLine) => a.row.created_seq - b.row.created_seq;
