import fc from 'fast-check';
import { expect, it } from 'vitest';
import type { LocationQuery } from 'vue-router';
import { readListQuery, writeListQuery } from '@/components/desk/listQuery';
import { NEWEST_FIRST, NO_FILTERS, SORT_KEYS } from '@/components/desk/runLines';

it('filters and order come back from the address as they went in', () => {
  const filters = fc.record({
    bench: fc.option(fc.integer({ min: 1, max: 40 })),
    kind: fc.option(fc.constantFrom('tap' as const, 'keyed_total' as const, 'keyed_splits' as const, 'gate' as const)),
    onlyOpen: fc.boolean(),
    text: fc.string(),
  });
  const sorting = fc.record({ by: fc.constantFrom(...SORT_KEYS), isDescending: fc.boolean() });
  fc.assert(
    fc.property(filters, sorting, (filters, sorting) => {
      expect(readListQuery(writeListQuery(filters, sorting) as LocationQuery)).toEqual({ filters, sorting });
    }),
  );
});

it('a list as usual leaves the address bare, and an address of anything else shows it as usual', () => {
  expect(writeListQuery(NO_FILTERS, NEWEST_FIRST)).toEqual({});
  expect(readListQuery({ bench: '-1', kind: 'song', open: 'yes', sort: '-colour' })).toEqual({
    filters: NO_FILTERS,
    sorting: NEWEST_FIRST,
  });
});
