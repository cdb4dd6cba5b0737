import { randomUUID } from 'node:crypto';
import { Op, type Transaction } from 'sequelize';
import type { Deps } from '../deps';
import { AppError } from '../errors';
import type { SignIn } from '../models/SignIn';
import type { StaffAccount } from '../models/StaffAccount';
import type { Student } from '../models/Student';
import type { SignedIn } from '../policies/actor';

const DAY_MS = 86_400_000;

/**
 * How long a device stays signed in: in all, and with no request. Field work needs neither, but a
 * term of lessons should not ask for the PIN again. Common practice, no source.
 */
export const SIGN_IN_LIMITS = {
  student: { absoluteMs: 90 * DAY_MS, idleMs: 30 * DAY_MS },
  staff: { absoluteMs: 30 * DAY_MS, idleMs: 14 * DAY_MS },
} as const;

/** `last_seen_ms` is only as exact as the idle limit needs: not every request should write. */
const SEEN_STEP_MS = 3_600_000;

/** Who proved to be themselves, as their row was when they did. */
export type Proven = { kind: 'staff'; account: StaffAccount } | { kind: 'student'; student: Student };

/**
 * A new sign-in. Between the proof and here others may have written, because hashing takes its turn:
 * it is made only if the password or PIN is still the one that was proven, and the account is open.
 */
export async function createSignIn(deps: Deps, proven: Proven): Promise<string> {
  const id = randomUUID();
  const at = deps.now();
  await deps.database.writeTransaction(async (transaction) => {
    if (proven.kind === 'staff') await refuseChangedAccount(deps, proven.account, transaction);
    else await refuseChangedStudent(deps, proven.student, transaction);
    const actor_id = proven.kind === 'staff' ? proven.account.id : proven.student.id;
    await deps.database.models.SignIn.create(
      { id, actor_kind: proven.kind, actor_id, created_ms: at, last_seen_ms: at },
      { transaction },
    );
  });
  return id;
}

export const passwordNotMatched = () =>
  new AppError(
    401,
    'password_not_matched',
    'E-mail address and password do not belong together. Check both, or ask for a new password.',
  );

export const pinNotMatched = () =>
  new AppError(
    401,
    'pin_not_matched',
    'Class code, bench, nickname and PIN do not belong together. Check all four; the teacher can give a new PIN.',
  );

/** The person behind a sign-in that is still good, read anew each time; undefined otherwise. */
export async function actorOf(deps: Deps, signInId: string): Promise<SignedIn | undefined> {
  const signIn = await deps.database.models.SignIn.findByPk(signInId);
  if (!signIn || signIn.revoked_ms !== null) return undefined;
  const limits = SIGN_IN_LIMITS[signIn.actor_kind];
  const at = deps.now();
  if (at - signIn.created_ms > limits.absoluteMs || at - signIn.last_seen_ms > limits.idleMs) return undefined;
  const actor = signIn.actor_kind === 'student' ? await studentOf(deps, signIn) : await staffOf(deps, signIn);
  if (actor && at - signIn.last_seen_ms > SEEN_STEP_MS) await markSeen(deps, signIn.id, at);
  return actor;
}

export async function revokeSignIn({ database, now }: Deps, signInId: string): Promise<void> {
  await database.writeTransaction((transaction) =>
    database.models.SignIn.update(
      { revoked_ms: now() },
      { where: { id: signInId, revoked_ms: { [Op.is]: null } }, transaction },
    ),
  );
}

export async function revokeAllSignIns(
  { database, now }: Deps,
  actorId: string,
  transaction: Transaction,
): Promise<void> {
  await database.models.SignIn.update(
    { revoked_ms: now() },
    { where: { actor_id: actorId, revoked_ms: { [Op.is]: null } }, transaction },
  );
}

async function refuseChangedAccount({ database }: Deps, proven: StaffAccount, transaction: Transaction) {
  const now = await database.models.StaffAccount.findByPk(proven.id, { transaction });
  if (now?.password_hash !== proven.password_hash || now.disabled_ms !== null) throw passwordNotMatched();
}

async function refuseChangedStudent({ database }: Deps, proven: Student, transaction: Transaction) {
  const now = await database.models.Student.findByPk(proven.id, { transaction });
  if (now?.pin_hash !== proven.pin_hash) throw pinNotMatched();
}

async function studentOf({ database }: Deps, signIn: SignIn): Promise<SignedIn | undefined> {
  const student = await database.models.Student.findByPk(signIn.actor_id);
  const schoolClass = student && (await database.models.SchoolClass.findByPk(student.class_id));
  return student && schoolClass
    ? { kind: 'student', id: student.id, signInId: signIn.id, student, schoolClass }
    : undefined;
}

async function staffOf({ database }: Deps, signIn: SignIn): Promise<SignedIn | undefined> {
  const account = await database.models.StaffAccount.findByPk(signIn.actor_id);
  if (!account || account.disabled_ms !== null) return undefined;
  return { kind: account.role, id: account.id, signInId: signIn.id, account };
}

async function markSeen({ database }: Deps, id: string, at: number): Promise<void> {
  await database.writeTransaction((transaction) =>
    database.models.SignIn.update({ last_seen_ms: at }, { where: { id, revoked_ms: { [Op.is]: null } }, transaction }),
  );
}
