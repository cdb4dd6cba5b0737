import type { SyncRequest } from '@shared/schemas/sync';
import { request } from './client';

/** Handing in and fetching, one function an endpoint. */

const schemas = () => import('@shared/schemas/sync');

export const sendBatch = (body: SyncRequest) =>
  request('/sync', {
    method: 'POST',
    body,
    answer: () => schemas().then((module) => module.SyncAnswer),
    timeout_ms: 30_000,
  });

export const fetchFeed = (after: number, limit: number) =>
  request(`/feed?after=${after}&limit=${limit}`, { answer: () => schemas().then((module) => module.FeedAnswer) });
