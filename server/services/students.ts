import { randomUUID } from 'node:crypto';
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

/** People one class may hold: a bound on what a leaked code can fill. */
const MAX_STUDENTS = 400;

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

/** The only time the PIN is known: from here on there is its hash. */
export async function joinClass(
  deps: Deps,
  wanted: { code: string; bench: number; nickname: string },
): Promise<{ student: Student; schoolClass: SchoolClass; pin: string }> {
  const schoolClass = await findClassByCode(deps, wanted.code);
  const pin = newPin();
  const pinHash = await deps.hasher.hash(pin);
  const { Student } = deps.database.models;
  const student = await deps.database.writeTransaction(async (transaction) => {
    const where = { class_id: schoolClass.id, bench: wanted.bench, nickname_key: nicknameKey(wanted.nickname) };
    if (await Student.findOne({ where, transaction })) {
      throw new AppError(
        409,
        'nickname_taken',
        `Somebody at bench ${wanted.bench} is called that already. If it is you, come back with your PIN; if not, take another nickname.`,
        [{ path: 'nickname', message: 'this nickname is taken at this bench' }],
      );
    }
    if ((await Student.count({ where: { class_id: schoolClass.id }, transaction })) >= MAX_STUDENTS) {
      throw new AppError(
        409,
        'class_full',
        `This class has ${MAX_STUDENTS} people, which is all it can hold. Tell the teacher.`,
      );
    }
    return Student.create(
      { id: randomUUID(), ...where, nickname: wanted.nickname, pin_hash: pinHash, created_ms: deps.now() },
      { transaction },
    );
  });
  return { student, schoolClass, pin };
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
  const student = await deps.database.models.Student.findByPk(studentId);
  if (!student) throw notFound('This student');
  const { code } = await classInScope(deps, actor, scope, student.class_id, 'This student');
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
