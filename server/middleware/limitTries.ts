import type { Request } from 'express';
import { ipKeyGenerator } from 'express-rate-limit';
import type { Deps } from '../deps';
import { AppError } from '../errors';
import type { TryLimit } from '../routes/route';

/** Answers that mean "that was a wrong guess". */
const FAILED = new Set([401, 404, 410]);

/**
 * Runs a handler where wrong guesses are counted, by address and by account. A try is counted before
 * it runs, so that many at once do not slip through, and given back when it was no wrong guess.
 */
export async function withTryLimit<Body, Answer>(
  { tries }: Deps,
  limit: TryLimit<Body>,
  req: Request,
  body: Body,
  run: () => Promise<Answer>,
): Promise<Answer> {
  const address = ipKeyGenerator(req.ip ?? 'unknown');
  const account = limit.account?.(body);
  tries.byAddress.take(address);
  if (account !== undefined) tries.byAccount.take(account);
  try {
    const answer = await run();
    giveBack();
    return answer;
  } catch (error) {
    if (!(error instanceof AppError && FAILED.has(error.status))) giveBack();
    throw error;
  }

  function giveBack(): void {
    tries.byAddress.giveBack(address);
    if (account !== undefined) tries.byAccount.giveBack(account);
  }
}
