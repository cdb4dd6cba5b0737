import { Op, type Transaction } from 'sequelize';
import type { StaffRole } from '@shared/schemas/accounts';
import type { Deps } from '../deps';
import { AppError, notFound, notSignedIn } from '../errors';
import { inviteLetter, resetLetter } from '../mail/letters';
import type { Mail } from '../mail/mailer';
import type { StaffAccount } from '../models/StaffAccount';
import type { StaffToken } from '../models/StaffToken';
import type { Actor, StaffActor } from '../policies/actor';
import { noteActivity } from './activity';
import { revokeAllSignIns } from './signIns';
import { createResetLink } from './staffAccounts';
import { createToken, dropTokens, openTokens } from './staffTokens';

/** What a coordinator does with staff. */

export async function listPeople(deps: Deps): Promise<{ staff: StaffAccount[]; invites: StaffToken[] }> {
  const [staff, invites] = await Promise.all([
    deps.database.models.StaffAccount.findAll({ order: [['name', 'ASC']] }),
    openTokens(deps, 'invite'),
  ]);
  return { staff, invites };
}

/** Mails an invitation; an earlier one to the same address stops working. */
export async function invite(
  deps: Deps,
  actor: StaffActor,
  wanted: { email: string; role: StaffRole },
): Promise<{ invite: StaffToken; link: string | null }> {
  const { token, row } = await deps.database.writeTransaction(async (transaction) => {
    await refuseIfShut(deps, actor, transaction);
    if (await deps.database.models.StaffAccount.findOne({ where: { email: wanted.email }, transaction })) {
      throw new AppError(409, 'already_staff', 'This e-mail address has an account already.');
    }
    await dropTokens(deps, { purpose: 'invite', email: wanted.email }, transaction);
    const made = await createToken(deps, { purpose: 'invite', ...wanted, invited_by: actor.id }, transaction);
    await noteActivity(deps, actor, 'people.invite', made.row.id, transaction);
    return made;
  });
  const link = `${deps.publicUrl}/invite/${token}`;
  if (!deps.mailer.sends) return { invite: row, link };
  try {
    await sendOrTell(deps, inviteLetter(wanted.email, wanted.role, link));
  } catch (error) {
    await withdrawInvite(deps, actor, row.id);
    throw error;
  }
  return { invite: row, link: null };
}

/** Mails a colleague a link to choose a new password, or gives it to the coordinator when no e-mail is set up. */
export async function sendColleagueResetLink(deps: Deps, actor: StaffActor, id: string): Promise<string | null> {
  const { account, link } = await deps.database.writeTransaction(async (transaction) => {
    await refuseIfShut(deps, actor, transaction);
    const account = await deps.database.models.StaffAccount.findByPk(id, { transaction });
    if (!account) throw notFound('This person');
    if (account.disabled_ms !== null) {
      throw new AppError(409, 'account_shut', 'This account is shut. Open it again, then make the link.');
    }
    await noteActivity(deps, actor, 'people.reset_link', id, transaction);
    return { account, link: await createResetLink(deps, id, transaction) };
  });
  if (!deps.mailer.sends) return link;
  await sendOrTell(deps, resetLetter(account.email, link));
  return null;
}

async function sendOrTell(deps: Deps, mail: Mail): Promise<void> {
  try {
    await deps.mailer.send(mail);
  } catch (error) {
    deps.log.error({ err: error }, 'a mail could not be sent');
    throw new AppError(
      502,
      'mail_not_sent',
      'The mail server did not take the mail. Check the e-mail set-up, then try again.',
    );
  }
}

/** The actor was read before this transaction: an account shut since then makes no more links. */
async function refuseIfShut({ database }: Deps, actor: StaffActor, transaction: Transaction): Promise<void> {
  const account = await database.models.StaffAccount.findByPk(actor.id, { transaction });
  if (account?.disabled_ms !== null) throw notSignedIn();
}

export async function withdrawInvite(deps: Deps, actor: Actor, id: string): Promise<void> {
  await deps.database.writeTransaction(async (transaction) => {
    const open = await deps.database.models.StaffToken.findOne({
      where: { id, purpose: 'invite', used_ms: { [Op.is]: null } },
      transaction,
    });
    if (!open) throw notFound('This invitation');
    await open.update({ used_ms: deps.now() }, { transaction });
    await noteActivity(deps, actor, 'people.withdraw_invite', id, transaction);
  });
}

/** Shuts an account and ends all its sign-ins, reset links and the invitations it made. The last coordinator stays: somebody must be able to let others in. */
export async function disablePerson(deps: Deps, actor: Actor, id: string): Promise<void> {
  const { StaffAccount } = deps.database.models;
  await deps.database.writeTransaction(async (transaction) => {
    const account = await StaffAccount.findByPk(id, { transaction });
    if (!account) throw notFound('This person');
    if (account.disabled_ms !== null) return;
    const others = await StaffAccount.count({
      where: { role: 'coordinator', disabled_ms: { [Op.is]: null }, id: { [Op.ne]: id } },
      transaction,
    });
    if (account.role === 'coordinator' && others === 0) {
      throw new AppError(
        409,
        'last_coordinator',
        'This is the only coordinator who can sign in. Invite another coordinator first.',
      );
    }
    await account.update({ disabled_ms: deps.now() }, { transaction });
    await revokeAllSignIns(deps, id, transaction);
    await dropTokens(deps, { purpose: 'reset', account_id: id }, transaction);
    await dropTokens(deps, { purpose: 'invite', invited_by: id }, transaction);
    await noteActivity(deps, actor, 'people.disable', id, transaction);
  });
}

export async function enablePerson(deps: Deps, actor: Actor, id: string): Promise<void> {
  await deps.database.writeTransaction(async (transaction) => {
    const account = await deps.database.models.StaffAccount.findByPk(id, { transaction });
    if (!account) throw notFound('This person');
    await account.update({ disabled_ms: null }, { transaction });
    await noteActivity(deps, actor, 'people.enable', id, transaction);
  });
}
