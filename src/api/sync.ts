import type { SyncRequest } from '@shared/schemas/sync';
import { request } from './client';

/** Handing in and fetching, one function an endpoint. */

const readings = () => import('./syncReadings');

export const sendBatch = (body: SyncRequest) =>
  request('/sync', {
    method: 'POST',
    body,
    answer: () => readings().then((module) => module.SyncReading),
    timeout_ms: 30_000,
  });

export const fetchFeed = (after: number, limit: number) =>
  request(`/feed?after=${after}&limit=${limit}`, { answer: () => readings().then((module) => module.FeedReading) });
