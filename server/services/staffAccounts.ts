import { randomUUID } from 'node:crypto';
import { Op, type Transaction } from 'sequelize';
import type { StaffRole } from '@shared/schemas/accounts';
import type { Deps } from '../deps';
import { AppError, badField } from '../errors';
import { resetLetter } from '../mail/letters';
import type { StaffAccount } from '../models/StaffAccount';
import { isCommonPassword } from './commonPasswords';
import { revokeAllSignIns } from './signIns';
import { createToken, dropTokens, findToken, useToken } from './staffTokens';

/** Accounts of staff: how they come to be, how they sign in, how a password is chosen anew. */

export async function anyStaff({ database }: Deps): Promise<boolean> {
  return (await database.models.StaffAccount.count()) > 0;
}

/** A new link to set up the first coordinator; earlier ones stop working. */
export async function createSetUpLink(deps: Deps): Promise<string> {
  const { token } = await deps.database.writeTransaction(async (transaction) => {
    await dropTokens(deps, { purpose: 'set_up' }, transaction);
    return createToken(deps, { purpose: 'set_up' }, transaction);
  });
  return `${deps.publicUrl}/set-up/${token}`;
}

export async function setUpFirstCoordinator(
  deps: Deps,
  wanted: { token: string; name: string; email: string; password: string },
): Promise<StaffAccount> {
  const passwordHash = await hashNewPassword(deps, wanted.password, [wanted.name, wanted.email]);
  return deps.database.writeTransaction(async (transaction) => {
    await useToken(deps, 'set_up', wanted.token, transaction);
    return createAccount(deps, { ...wanted, role: 'coordinator', passwordHash }, transaction);
  });
}

export async function acceptInvite(
  deps: Deps,
  wanted: { token: string; name: string; password: string },
): Promise<StaffAccount> {
  const { email: invited } = await findToken(deps, 'invite', wanted.token);
  const passwordHash = await hashNewPassword(deps, wanted.password, [wanted.name, invited!]);
  return deps.database.writeTransaction(async (transaction) => {
    const invite = await useToken(deps, 'invite', wanted.token, transaction);
    const { email, role } = invite;
    return createAccount(deps, { name: wanted.name, email: email!, role: role!, passwordHash }, transaction);
  });
}

/** The account, or undefined after as long a wait: a wrong password and an unknown e-mail look the same. */
export async function checkPassword(deps: Deps, email: string, password: string): Promise<StaffAccount | undefined> {
  const account = await deps.database.models.StaffAccount.findOne({ where: { email } });
  const { matches, stale } = await deps.hasher.verify(account?.password_hash ?? null, password);
  if (!account || !matches || account.disabled_ms !== null) return undefined;
  if (stale) {
    await replaceHash(deps, account, await deps.hasher.hash(password));
  }
  return account;
}

/** Puts the same password's newer hash in place of the one that was verified, and of no other. */
async function replaceHash({ database }: Deps, account: StaffAccount, fresh: string): Promise<void> {
  const { id, password_hash } = account;
  const [replaced] = await database.writeTransaction((transaction) =>
    database.models.StaffAccount.update({ password_hash: fresh }, { where: { id, password_hash }, transaction }),
  );
  if (replaced === 1) account.password_hash = fresh;
}

/** Mails a reset link when the account exists. Called after the answer went out, so its length tells nothing. */
export async function sendResetLink(deps: Deps, email: string): Promise<void> {
  const account = await deps.database.models.StaffAccount.findOne({
    where: { email, disabled_ms: { [Op.is]: null } },
  });
  if (!account) return;
  if (!deps.mailer.sends) {
    deps.log.warn({ account: account.id }, 'a new password was asked for, but no e-mail is set up (SMTP_URL)');
    return;
  }
  const link = await deps.database.writeTransaction((transaction) => createResetLink(deps, account.id, transaction));
  await deps.mailer.send(resetLetter(email, link));
}

/** One more link to choose a new password. Those before stay good until one is used: mails may come late and in any order. */
export async function createResetLink(
  deps: Pick<Deps, 'database' | 'now' | 'publicUrl'>,
  account_id: string,
  transaction: Transaction,
): Promise<string> {
  const { token } = await createToken(deps, { purpose: 'reset', account_id }, transaction);
  return `${deps.publicUrl}/reset/${token}`;
}

/** Sets the new password, ends the account's other reset links and signs it out everywhere. It does not sign in. */
export async function resetPassword(deps: Deps, token: string, password: string): Promise<void> {
  const { StaffAccount } = deps.database.models;
  const { account_id } = await findToken(deps, 'reset', token);
  const { id, name, email } = (await StaffAccount.findByPk(account_id!))!;
  const password_hash = await hashNewPassword(deps, password, [name, email]);
  await deps.database.writeTransaction(async (transaction) => {
    await useToken(deps, 'reset', token, transaction);
    await dropTokens(deps, { purpose: 'reset', account_id: id }, transaction);
    await StaffAccount.update({ password_hash }, { where: { id }, transaction });
    await revokeAllSignIns(deps, id, transaction);
  });
}

async function hashNewPassword(deps: Deps, password: string, ownWords: string[]): Promise<string> {
  if (isCommonPassword(password)) {
    throw badField('password', 'this password is one of the first that are tried: take one nobody would guess');
  }
  if (ownWords.some((word) => word.toLowerCase() === password.toLowerCase())) {
    throw badField('password', 'this password is your own name or address: take one nobody would guess');
  }
  return deps.hasher.hash(password);
}

async function createAccount(
  { database, now }: Deps,
  wanted: { name: string; email: string; role: StaffRole; passwordHash: string },
  transaction: Transaction,
): Promise<StaffAccount> {
  const { name, email, role, passwordHash } = wanted;
  if (await database.models.StaffAccount.findOne({ where: { email }, transaction })) {
    throw new AppError(409, 'already_staff', 'This e-mail address has an account already. Sign in with it.');
  }
  return database.models.StaffAccount.create(
    { id: randomUUID(), name, email, role, password_hash: passwordHash, created_ms: now() },
    { transaction },
  );
}
