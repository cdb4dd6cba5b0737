import { Op } from 'sequelize';
import type { StaffRole } from '@shared/schemas/accounts';
import type { Deps } from '../deps';
import { AppError, notFound } from '../errors';
import { inviteLetter } from '../mail/letters';
import type { StaffAccount } from '../models/StaffAccount';
import type { StaffToken } from '../models/StaffToken';
import type { Actor } from '../policies/actor';
import { noteActivity } from './activity';
import { revokeAllSignIns } from './signIns';
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
  actor: Actor,
  wanted: { email: string; role: StaffRole },
): Promise<{ invite: StaffToken; link: string | null }> {
  const { token, row } = await deps.database.writeTransaction(async (transaction) => {
    if (await deps.database.models.StaffAccount.findOne({ where: { email: wanted.email }, transaction })) {
      throw new AppError(409, 'already_staff', 'This e-mail address has an account already.');
    }
    await dropTokens(deps, { purpose: 'invite', email: wanted.email }, transaction);
    const made = await createToken(deps, { purpose: 'invite', ...wanted }, transaction);
    await noteActivity(deps, actor, 'people.invite', made.row.id, transaction);
    return made;
  });
  const link = `${deps.publicUrl}/invite/${token}`;
  if (!deps.mailer.sends) return { invite: row, link };
  try {
    await deps.mailer.send(inviteLetter(wanted.email, wanted.role, link));
  } catch (error) {
    deps.log.error({ err: error }, 'an invitation could not be mailed');
    await withdrawInvite(deps, actor, row.id);
    throw new AppError(
      502,
      'mail_not_sent',
      'The mail server did not take the invitation. Check the e-mail set-up, then invite again.',
    );
  }
  return { invite: row, link: null };
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

/** Shuts an account and ends all its sign-ins. The last coordinator stays: somebody must be able to let others in. */
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
