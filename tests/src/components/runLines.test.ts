import { expect, it } from 'vitest';
import { filterLines, NEWEST_FIRST, NO_FILTERS, SORT_KEYS, sortLines, type RunLine } from '@/components/desk/runLines';

const line = (parts: Partial<RunLine>): RunLine => ({
  id: 'a',
  bench: 1,
  who: 'Robin',
  kind: 'tap',
  length_m: null,
  swings: 20,
  small_period_s: null,
  period_s: null,
  g_m_s2: null,
  open_flags: 0,
  isSetAside: false,
  received_wall_ms: 0,
  receipt: 'K7QM',
  note: '',
  order: 1,
  ...parts,
});
const ids = (lines: RunLine[]) => lines.map(({ id }) => id).join('');

const lines = [
  line({ id: 'a', bench: 1, who: 'Robin' }),
  line({ id: 'b', bench: 2, kind: 'gate', note: 'draught from the door' }),
  line({ id: 'c', bench: 2, open_flags: 2, receipt: 'T3WX' }),
  line({ id: 'd', bench: null, who: 'Alex', kind: 'keyed_total' }),
];

it('without filters every run is listed', () => {
  expect(ids(filterLines(lines, NO_FILTERS))).toBe('abcd');
});

it('filters by bench, kind and open flags hold together', () => {
  expect(ids(filterLines(lines, { ...NO_FILTERS, bench: 2 }))).toBe('bc');
  expect(ids(filterLines(lines, { ...NO_FILTERS, bench: 2, onlyOpen: true }))).toBe('c');
  expect(ids(filterLines(lines, { ...NO_FILTERS, kind: 'gate' }))).toBe('b');
});

it('words are looked for in who, note and receipt, in any case', () => {
  expect(ids(filterLines(lines, { ...NO_FILTERS, text: ' ALEX' }))).toBe('d');
  expect(ids(filterLines(lines, { ...NO_FILTERS, text: 'draught' }))).toBe('b');
  expect(ids(filterLines(lines, { ...NO_FILTERS, text: 't3w' }))).toBe('c');
});

it('newest first follows the server, with what it has not got yet on top', () => {
  const mixed = [
    line({ id: 'a', order: 7 }),
    line({ id: 'b', order: Number.MAX_SAFE_INTEGER }),
    line({ id: 'c', order: 9 }),
  ];
  expect(ids(sortLines(mixed, NEWEST_FIRST))).toBe('bca');
});

it('sorts figures as figures, either way, with what is not known last', () => {
  const length = (id: string, value: number | null) =>
    line({ id, length_m: value === null ? null : { value, u: 0.001 } });
  const some = [length('a', 0.9), length('b', null), length('c', 10), length('d', 1.2)];
  expect(ids(sortLines(some, { by: 'length', isDescending: false }))).toBe('adcb');
  expect(ids(sortLines(some, { by: 'length', isDescending: true }))).toBe('cdab');
});

it('stands newest first among equals, whatever it is sorted by', () => {
  const some = [line({ id: 'a', order: 3 }), line({ id: 'b', order: 5 }), line({ id: 'c', order: 4 })];
  for (const by of SORT_KEYS.filter((key) => key !== 'received'))
    expect([by, ids(sortLines(some, { by, isDescending: false }))]).toEqual([by, 'bca']);
});
