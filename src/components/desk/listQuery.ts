import type { LocationQuery, LocationQueryRaw } from 'vue-router';
import { NEWEST_FIRST, NO_FILTERS, SORT_KEYS, type RunFilters, type RunLine, type Sorting } from './runLines';

/** How a list of runs is narrowed and sorted, as it stands in the page's address: it survives a look at a run, and can be passed on. */

const KINDS: readonly RunLine['kind'][] = ['tap', 'keyed_total', 'keyed_splits', 'gate'];

/** @example readListQuery({ bench: '2', sort: '-period' }) // bench 2, longest period first */
export function readListQuery(query: LocationQuery): { filters: RunFilters; sorting: Sorting } {
  const text = (name: string) => String(query[name] ?? '');
  const bench = Number(text('bench'));
  const by = SORT_KEYS.find((key) => key === text('sort').replace(/^-/, ''));
  return {
    filters: {
      bench: Number.isInteger(bench) && bench > 0 ? bench : null,
      kind: KINDS.find((kind) => kind === text('kind')) ?? null,
      onlyOpen: text('open') === '1',
      text: text('find'),
    },
    sorting: by ? { by, isDescending: text('sort').startsWith('-') } : NEWEST_FIRST,
  };
}

/** The address's part for these; what is as usual is left out. */
export function writeListQuery({ bench, kind, onlyOpen, text }: RunFilters, sorting: Sorting): LocationQueryRaw {
  const { by, isDescending } = sorting;
  const isUsual = by === NEWEST_FIRST.by && isDescending === NEWEST_FIRST.isDescending;
  return {
    ...(bench !== NO_FILTERS.bench && { bench: String(bench) }),
    ...(kind && { kind }),
    ...(onlyOpen && { open: '1' }),
    ...(text !== '' && { find: text }),
    ...(!isUsual && { sort: `${isDescending ? '-' : ''}${by}` }),
  };
}
