import { z } from 'zod';
import { Analysis } from '@shared/schemas/analysis';
import { FeedAnswer, FeedItem, SyncAnswer, Verdict } from '@shared/schemas/sync';
import { readTolerantly } from './tolerant';

/**
 * The answers about runs and edits as a phone reads them: each verdict, analysis and item stands for itself.
 * One of a shape not known here, from a newer server, takes no receipt with it and holds up no feed.
 */

const each = <T>(schema: z.ZodType<T>) =>
  z.array(z.unknown()).transform((parts): T[] => parts.flatMap((part) => readTolerantly(schema, part) ?? []));

/** Who reads: this file's address, whose name in a build is made of its content and of the schemas it takes in. */
const READER = import.meta.url;

/** A page of the feed as far as this page understands it. */
export type FeedPage = FeedAnswer & {
  reader: string;
  /** Places of items not understood in full, lowest first; without a place it may be anywhere: from the start. */
  not_understood: number[];
};

export const SyncReading = SyncAnswer.extend({ verdicts: each(Verdict), analyses: each(Analysis) });
export const FeedReading = FeedAnswer.extend({ items: z.array(z.unknown()) }).transform(
  ({ items, ...page }): FeedPage => ({
    ...page,
    items: items.flatMap((item) => readTolerantly(FeedItem, item) ?? []),
    reader: READER,
    not_understood: items
      .filter((item) => !FeedItem.safeParse(item).success)
      .map((item) => placeOf(item) ?? 1)
      .sort((a, b) => a - b),
  }),
);

function placeOf(item: unknown): number | undefined {
  const place = typeof item === 'object' && item !== null && 'seq' in item ? item.seq : undefined;
  return Number.isInteger(place) ? (place as number) : undefined;
}
