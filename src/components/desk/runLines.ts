import type { RawRun } from '@shared/schemas/run';
import type { RunEntry } from '@/stores/useRuns';

/** A run as the Desk's list shows it. */
export interface RunLine {
  id: string;
  bench: number | null;
  who: string;
  kind: RawRun['capture']['kind'];
  swings: number | null;
  small_period_s: Stated | null;
  period_s: Stated | null;
  g_m_s2: Stated | null;
  open_flags: number;
  /** Null while this device has made the run and not yet handed it in. */
  received_wall_ms: number | null;
  receipt: string;
  note: string;
  /** Server's order; runs not handed in yet come after all others made. */
  order: number;
}

interface Stated {
  value: number;
  expanded_u: number;
}

export interface RunFilters {
  bench: number | null;
  kind: RunLine['kind'] | null;
  onlyOpen: boolean;
  text: string;
}

export const NO_FILTERS: RunFilters = { bench: null, kind: null, onlyOpen: false, text: '' };

export function runLine(entry: RunEntry): RunLine {
  const { row, raw } = entry;
  const analysis = listedAnalysis(entry);
  return {
    id: row.id,
    bench: row.bench,
    who: row.author?.name ?? '',
    kind: raw.capture.kind,
    swings: analysis.swings,
    small_period_s: analysis.small_period_s,
    period_s: analysis.period_s,
    g_m_s2: analysis.g_m_s2,
    open_flags: analysis.flags.filter((flag) => !flag.answered).length,
    received_wall_ms: row.receipt?.received_wall_ms ?? null,
    receipt: row.receipt?.code ?? '',
    note: raw.note,
    order: row.receipt?.server_seq ?? Number.MAX_SAFE_INTEGER,
  };
}

/** Newest first, by the server's order: device clocks are no order. */
export function newestFirst(lines: RunLine[]): RunLine[] {
  return [...lines].sort((a, b) => b.order - a.order || b.id.localeCompare(a.id));
}

export function filterLines(lines: RunLine[], filters: RunFilters): RunLine[] {
  const wanted = filters.text.trim().toLowerCase();
  return lines.filter(
    (line) =>
      (filters.bench === null || line.bench === filters.bench) &&
      (filters.kind === null || line.kind === filters.kind) &&
      (!filters.onlyOpen || line.open_flags > 0) &&
      [line.who, line.note, line.receipt].some((text) => text.toLowerCase().includes(wanted)),
  );
}

/** The server's analysis while nothing newer waits here: a long list must not be computed anew on every device. */
function listedAnalysis(entry: RunEntry): RunEntry['analysis'] {
  const isAhead = entry.edits.some(({ row }) => row.state === 'waiting');
  return (isAhead ? null : entry.official?.analysis) ?? entry.analysis;
}
