import { request } from './client';

/** A class's Board. The pass goes in a header, so that it stands in no server's log. */
export const fetchBoard = (pass: string, after: number) =>
  request(`/board?after=${after}`, {
    headers: { 'X-Board-Pass': pass },
    answer: () => import('@shared/schemas/accounts').then((module) => module.BoardAnswer),
    timeout_ms: 8_000,
  });
