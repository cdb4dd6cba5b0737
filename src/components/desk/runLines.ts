import type { RawRun } from '@shared/schemas/run';
import type { Measured } from '@shared/schemas/common';
import type { RunEntry } from '@/stores/useRuns';

/** A run as the Desk's list shows it. */
export interface RunLine {
  id: string;
  bench: number | null;
  who: string;
  kind: RawRun['capture']['kind'];
  length_m: Measured | null;
  swings: number | null;
  small_period_s: Stated | null;
  period_s: Stated | null;
  g_m_s2: Stated | null;
  open_flags: number;
  isSetAside: boolean;
  /** Null while this device has made the run and not yet handed it in. */
  received_wall_ms: number | null;
  receipt: string;
  note: string;
  /** Server's order; runs not handed in yet come after all others made. */
  order: number;
}

interface Stated extends Measured {
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
    length_m: analysis.length_m,
    swings: analysis.swings,
    small_period_s: analysis.small_period_s,
    period_s: analysis.period_s,
    g_m_s2: analysis.g_m_s2,
    open_flags: analysis.flags.filter((flag) => !flag.answered).length,
    isSetAside: entry.setAside !== null,
    received_wall_ms: row.receipt?.received_wall_ms ?? null,
    receipt: row.receipt?.code ?? '',
    note: raw.note,
    order: row.receipt?.server_seq ?? Number.MAX_SAFE_INTEGER,
  };
}

/** What the list can be sorted by. */
export const SORT_KEYS = ['bench', 'who', 'kind', 'length', 'swings', 'period', 'g', 'flags', 'received'] as const;
export type SortKey = (typeof SORT_KEYS)[number];
export interface Sorting {
  by: SortKey;
  isDescending: boolean;
}

/** Newest first, by the server's order: device clocks are no order. */
export const NEWEST_FIRST: Sorting = { by: 'received', isDescending: true };

const SORTED_BY: Record<SortKey, (line: RunLine) => number | string | null> = {
  bench: ({ bench }) => bench,
  who: ({ who }) => who || null,
  kind: ({ kind }) => kind,
  length: ({ length_m }) => length_m?.value ?? null,
  swings: ({ swings }) => swings,
  period: ({ small_period_s, period_s }) => (small_period_s ?? period_s)?.value ?? null,
  g: ({ g_m_s2 }) => g_m_s2?.value ?? null,
  flags: ({ open_flags }) => open_flags,
  received: ({ order }) => order,
};

/** Lines in that order; what a line does not have stands last either way, and equals stand newest first. */
export function sortLines(lines: RunLine[], { by, isDescending }: Sorting): RunLine[] {
  const keyed = lines.map((line) => ({ line, key: SORTED_BY[by](line) }));
  const sign = isDescending ? -1 : 1;
  return keyed
    .sort((a, b) => compared(a.key, b.key, sign) || b.line.order - a.line.order || b.line.id.localeCompare(a.line.id))
    .map(({ line }) => line);
}

function compared(a: number | string | null, b: number | string | null, sign: 1 | -1): number {
  if (a === null || b === null) return Number(a === null) - Number(b === null);
  return sign * (typeof a === 'number' && typeof b === 'number' ? a - b : String(a).localeCompare(String(b)));
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
