import type { ErrorRequestHandler, RequestHandler, Response } from 'express';
import type { ErrorAnswer } from '@shared/schemas/errors';
import { AppError } from '../errors';
import { TooManyTries } from '../services/tryCounter';

/** For /api alone: an address that is not there must never answer with a page, which a phone could take for a receipt. */
export const unknownApiRoute: RequestHandler = (req) => {
  throw new AppError(404, 'no_such_route', `The server has nothing at ${req.method} ${req.path}.`);
};

/** The last handler. What was thrown on purpose is told; all else is logged in full and answered blandly. */
export const answerErrors: ErrorRequestHandler = (error: unknown, req, res, next) => {
  if (res.headersSent) return next(error);
  const known = error instanceof AppError ? error : fromBodyParser(error);
  if (known) {
    if (known instanceof TooManyTries) res.set('Retry-After', String(known.retryAfterS));
    return answer(res, known);
  }
  req.log.error({ err: error }, 'a request failed');
  answer(res, new AppError(500, 'server_error', 'The server could not finish this. Nothing was half done; try again.'));
};

function answer(res: Response, { status, code, message, fields }: AppError): void {
  const body: ErrorAnswer = { error: { code, message, fields } };
  res.status(status).json(body);
}

/** Express and its body parser mark their errors with a status, and a type for the cause. */
function fromBodyParser(error: unknown): AppError | undefined {
  const { type, status, limit } = error as { type?: string; status?: number; limit?: number };
  if (type === 'entity.parse.failed') {
    return new AppError(400, 'not_json', 'The request is not whole JSON: it may have been cut off. Send it again.');
  }
  if (type === 'entity.too.large') {
    return new AppError(413, 'too_large', `The request is over ${limit} bytes. Send less at a time.`);
  }
  if (status === 415) return new AppError(415, 'json_only', 'This request is not plain JSON in UTF-8.');
  if (status === 400) return new AppError(400, 'not_readable', 'The request could not be read. Send it again.');
  return undefined;
}
