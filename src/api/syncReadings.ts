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

export const SyncReading = SyncAnswer.extend({ verdicts: each(Verdict), analyses: each(Analysis) });
export const FeedReading = FeedAnswer.extend({ items: each(FeedItem) });
