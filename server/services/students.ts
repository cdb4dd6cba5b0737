import type { ClassCard } from '@shared/schemas/accounts';
import type { Deps } from '../deps';
import { AppError, notFound } from '../errors';
import type { SchoolClass } from '../models/SchoolClass';
import { nicknameKey, type Student } from '../models/Student';
import type { Actor } from '../policies/actor';
import type { Scope } from '../policies/permissions';
import { noteActivity } from './activity';
import { classInScope } from './classes';
import { newPin } from './secrets';
import { revokeAllSignIns } from './signIns';

/** Students: a class code, a bench and a nickname, and a PIN to come back with. */

export async function findClassByCode({ database }: Deps, code: string): Promise<SchoolClass> {
  const schoolClass = await database.models.SchoolClass.findOne({ where: { code } });
  if (!schoolClass) {
    throw new AppError(404, 'no_such_class', `No class has the code ${code}. Look at the board and type it again.`);
  }
  return schoolClass;
}

export async function classCard({ database }: Deps, schoolClass: SchoolClass): Promise<ClassCard> {
  const benches = await database.select<{ bench: number; people: number }>(
    'SELECT bench, count(*) AS people FROM students WHERE class_id = $1 GROUP BY bench ORDER BY bench',
    [schoolClass.id],
  );
  return { name: schoolClass.name, teacher_word: schoolClass.teacher_word, benches };
}

/** The student who has this PIN, or undefined after as long a wait when there is no such class or nickname. */
export async function checkPin(
  deps: Deps,
  said: { code: string; bench: number; nickname: string; pin: string },
): Promise<{ student: Student; schoolClass: SchoolClass } | undefined> {
  const { SchoolClass, Student } = deps.database.models;
  const schoolClass = await SchoolClass.findOne({ where: { code: said.code } });
  const student =
    schoolClass &&
    (await Student.findOne({
      where: { class_id: schoolClass.id, bench: said.bench, nickname_key: nicknameKey(said.nickname) },
    }));
  const { matches } = await deps.hasher.verify(student?.pin_hash ?? null, said.pin);
  return student && matches ? { student, schoolClass } : undefined;
}

/** What wrong PINs are counted by. */
export const pinAccount = ({ code, bench, nickname }: { code: string; bench: number; nickname: string }) =>
  `${code} ${bench} ${nicknameKey(nickname)}`;

/** A new PIN for a student who lost the old one, good at once. Devices signed in with the old one are signed out. */
export async function renewPin(deps: Deps, actor: Actor, scope: Scope, studentId: string): Promise<string> {
  const { student, schoolClass } = await studentInScope(deps, actor, scope, studentId);
  const { code } = schoolClass;
  const pin = newPin();
  const pinHash = await deps.hasher.hash(pin);
  await deps.database.writeTransaction(async (transaction) => {
    await student.update({ pin_hash: pinHash }, { transaction });
    await revokeAllSignIns(deps, student.id, transaction);
    await noteActivity(deps, actor, 'student.new_pin', student.id, transaction);
  });
  deps.tries.byAccount.forget(pinAccount({ code, bench: student.bench, nickname: student.nickname }));
  return pin;
}

/** Takes out somebody who handed nothing in. Whoever did stays: runs and edits keep their author. */
export async function removeStudent(deps: Deps, actor: Actor, scope: Scope, studentId: string): Promise<void> {
  const { student } = await studentInScope(deps, actor, scope, studentId);
  const { Edit, Run } = deps.database.models;
  await deps.database.writeTransaction(async (transaction) => {
    const handedIn =
      (await Run.count({ where: { owner_id: student.id }, transaction })) +
      (await Edit.count({ where: { author_id: student.id }, transaction }));
    if (handedIn > 0) {
      throw new AppError(
        409,
        'student_has_runs',
        'This student has handed in work, which is kept with its author. A new PIN shuts others out.',
      );
    }
    await revokeAllSignIns(deps, student.id, transaction);
    await student.destroy({ transaction });
    await noteActivity(deps, actor, 'student.remove', student.id, transaction);
  });
}

async function studentInScope(
  deps: Deps,
  actor: Actor,
  scope: Scope,
  id: string,
): Promise<{ student: Student; schoolClass: SchoolClass }> {
  const student = await deps.database.models.Student.findByPk(id);
  if (!student) throw notFound('This student');
  return { student, schoolClass: await classInScope(deps, actor, scope, student.class_id, 'This student') };
}
