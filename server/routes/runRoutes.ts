import { z } from 'zod';
import { BoardAnswer } from '@shared/schemas/accounts';
import { MAX_SYNC_BYTES } from '@shared/schemas/limits';
import { FeedAnswer, SyncAnswer, SyncRequest } from '@shared/schemas/sync';
import type { BoardActor, SignedIn } from '../policies/actor';
import { boardAfter } from '../services/board';
import { feedAfter, MOST_FEED_ITEMS } from '../services/feed';
import { handIn } from '../services/intake/handIn';
import { route } from './route';

/** A whole number as it stands in an address. */
const count = (most: number) =>
  z
    .string()
    .regex(/^\d{1,16}$/, 'a whole number from 0')
    .transform(Number)
    .pipe(z.int().min(0).max(most));
const After = count(Number.MAX_SAFE_INTEGER).default(0);

export const runRoutes = [
  route({
    method: 'post',
    path: '/api/sync',
    action: 'runs.hand_in',
    summary: 'Hand in runs and edits; one verdict for each, in the order sent',
    body: SyncRequest,
    answer: SyncAnswer,
    maxBytes: MAX_SYNC_BYTES,
    handler: ({ deps, actor, body }) => handIn(deps, actor as SignedIn, body),
  }),
  route({
    method: 'get',
    path: '/api/feed',
    action: 'runs.feed',
    summary: 'Runs, edits and analyses since a cursor, in the order of the server',
    query: z.strictObject({
      after: After,
      limit: count(MOST_FEED_ITEMS).pipe(z.int().min(1)).default(MOST_FEED_ITEMS),
    }),
    answer: FeedAnswer,
    handler: ({ deps, actor, scope, query }) => feedAfter(deps, actor as SignedIn, scope, query),
  }),
  route({
    method: 'get',
    path: '/api/board',
    action: 'board.see',
    summary: 'Dots of one class since a cursor; the board pass goes in the header X-Board-Pass',
    query: z.strictObject({ after: After }),
    answer: BoardAnswer,
    handler: ({ deps, actor, query }) => boardAfter(deps, actor as BoardActor, query.after),
  }),
];
