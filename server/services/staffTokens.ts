import { randomUUID } from 'node:crypto';
import { Op, type Transaction } from 'sequelize';
import type { Deps } from '../deps';
import { AppError } from '../errors';
import type { StaffToken } from '../models/StaffToken';
import { newToken, tokenHash } from './secrets';

const MINUTE_MS = 60_000;
const DAY_MS = 86_400_000;

/**
 * How long a link stays good. Reset: half an hour, longer than the ten minutes often advised for
 * codes a person types, because school mail servers hold mail back for a quarter of an hour, and
 * 256 random bits cannot be guessed in either.
 */
const LIFE_MS = { set_up: 7 * DAY_MS, invite: 7 * DAY_MS, reset: 30 * MINUTE_MS } as const;

type Bound = Pick<StaffToken, 'purpose'> & Partial<Pick<StaffToken, 'email' | 'role' | 'account_id' | 'invited_by'>>;

export async function createToken(
  { database, now }: Pick<Deps, 'database' | 'now'>,
  bound: Bound,
  transaction: Transaction,
): Promise<{ token: string; row: StaffToken }> {
  const token = newToken();
  const at = now();
  const row = await database.models.StaffToken.create(
    {
      id: randomUUID(),
      ...bound,
      token_hash: tokenHash(token),
      created_ms: at,
      expires_ms: at + LIFE_MS[bound.purpose],
    },
    { transaction },
  );
  return { token, row };
}

/** Uses up a token, once: of two requests at a time the second finds it used. */
export async function useToken(
  deps: Deps,
  purpose: StaffToken['purpose'],
  token: string,
  transaction: Transaction,
): Promise<StaffToken> {
  const row = await findToken(deps, purpose, token, transaction);
  return row.update({ used_ms: deps.now() }, { transaction });
}

/** What an open token is bound to. It stays open. */
export async function findToken(
  { database, now }: Deps,
  purpose: StaffToken['purpose'],
  token: string,
  transaction?: Transaction,
): Promise<StaffToken> {
  const row = await database.models.StaffToken.findOne({
    where: { purpose, token_hash: tokenHash(token), used_ms: { [Op.is]: null }, expires_ms: { [Op.gt]: now() } },
    transaction,
  });
  if (!row) {
    throw new AppError(410, 'link_used_up', 'This link has been used, replaced or has run out. Ask for a new one.');
  }
  return row;
}

/** Takes every open token of the kind out of use. */
export async function dropTokens({ database, now }: Deps, bound: Bound, transaction: Transaction): Promise<void> {
  await database.models.StaffToken.update(
    { used_ms: now() },
    { where: { ...bound, used_ms: { [Op.is]: null } }, transaction },
  );
}

export async function openTokens({ database, now }: Deps, purpose: StaffToken['purpose']): Promise<StaffToken[]> {
  return database.models.StaffToken.findAll({
    where: { purpose, used_ms: { [Op.is]: null }, expires_ms: { [Op.gt]: now() } },
    order: [['created_ms', 'ASC']],
  });
}
