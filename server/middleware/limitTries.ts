import type { Request } from 'express';
import { ipKeyGenerator } from 'express-rate-limit';
import type { Deps } from '../deps';
import { AppError } from '../errors';
import type { TryLimit } from '../routes/route';

/** Answers that mean "that was a wrong guess". */
const FAILED = new Set([401, 404, 410]);

/** The address tries are counted by; of IPv6 the network. */
export const addressOf = (req: Request) => ipKeyGenerator(req.ip ?? 'unknown');

/** Runs a handler where wrong guesses are counted: by account where one is named, else by address. */
export async function withTryLimit<Body, Answer>(
  { tries }: Deps,
  limit: TryLimit<Body>,
  req: Request,
  body: Body,
  run: () => Promise<Answer>,
): Promise<Answer> {
  const address = addressOf(req);
  const leave = tries.open.enter(address);
  try {
    if (!limit.account) return await countedByAddress(tries, address, run);
    const account = limit.account(body);
    return await countedByAccount(tries, account, limit.fromAnywhere ? account : `${account} ${address}`, run);
  } finally {
    leave();
  }
}

/** Only wrong guesses count: a school that comes in through one address at one bell is not held back. */
async function countedByAddress<Answer>(
  { byAddress }: Deps['tries'],
  address: string,
  run: () => Promise<Answer>,
): Promise<Answer> {
  byAddress.check(address);
  try {
    return await run();
  } catch (error) {
    // May throw in its turn: of many guesses at once those over the limit are not even told they were wrong.
    if (isWrongGuess(error)) byAddress.take(address);
    throw error;
  }
}

/** A try counts before it runs, so that of many at once none slips through, and is given back when it was no wrong guess. */
async function countedByAccount<Answer>(
  { byAccount, byAccountAnywhere }: Deps['tries'],
  account: string,
  place: string,
  run: () => Promise<Answer>,
): Promise<Answer> {
  const taken = [byAccount.take(place)];
  try {
    taken.push(byAccountAnywhere.take(account));
    const answer = await run();
    giveBack();
    return answer;
  } catch (error) {
    if (!isWrongGuess(error)) giveBack();
    throw error;
  }

  function giveBack(): void {
    for (const back of taken) back();
  }
}

const isWrongGuess = (error: unknown) => error instanceof AppError && FAILED.has(error.status);
