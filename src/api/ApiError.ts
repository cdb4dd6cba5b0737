import type { ErrorAnswer } from '@shared/schemas/errors';

/**
 * offline: nothing answered. timeout: the answer did not come in time. not_ours: something answered that is
 * not this server's API: a portal page, a redirect, half an answer. signed_out: 401 from our server.
 * refused: our server said why not. server: our server, or one before it, had trouble; the same may work later.
 */
export type ApiErrorKind = 'offline' | 'timeout' | 'not_ours' | 'signed_out' | 'refused' | 'server';

export class ApiError extends Error {
  override name = 'ApiError';

  /**
   * @param kind     what it means for the caller
   * @param status   HTTP status, 0 when there was none
   * @param code     the server's stable code, '' when it gave none
   * @param message  the server's words, or what was seen
   * @param fields   what was not right with which field
   */
  constructor(
    readonly kind: ApiErrorKind,
    readonly status: number,
    readonly code: string,
    message: string,
    readonly fields: ErrorAnswer['error']['fields'] = [],
  ) {
    super(message);
  }
}
