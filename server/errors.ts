import type { ErrorAnswer } from '@shared/schemas/errors';

export type FieldMessage = ErrorAnswer['error']['fields'][number];

/** An error a person can act on. Everything else that is thrown becomes a bland 500 and a full log line. */
export class AppError extends Error {
  constructor(
    readonly status: number,
    readonly code: string,
    message: string,
    readonly fields: FieldMessage[] = [],
  ) {
    super(message);
  }
}

export const badInput = (fields: FieldMessage[]) =>
  new AppError(400, 'bad_input', fields[0]?.message ?? 'Something in the form could not be read.', fields);
export const badField = (path: string, message: string) => badInput([{ path, message }]);
export const notSignedIn = () =>
  new AppError(401, 'not_signed_in', 'Nobody is signed in here. Sign in again to go on.');
export const notAllowed = () => new AppError(403, 'not_allowed', 'Your role does not allow this.');
export const notFound = (what: string) => new AppError(404, 'not_found', `${what} is not here, or not yours to see.`);
