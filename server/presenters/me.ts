import type { Me } from '@shared/schemas/accounts';
import type { SchoolClass } from '../models/SchoolClass';
import type { StaffAccount } from '../models/StaffAccount';
import type { Student } from '../models/Student';
import { isSignedIn, type Actor } from '../policies/actor';

export const presentStudent = (student: Student, schoolClass: SchoolClass): Me => ({
  kind: 'student',
  id: student.id,
  nickname: student.nickname,
  bench: student.bench,
  class: { id: schoolClass.id, name: schoolClass.name, teacher_word: schoolClass.teacher_word },
});

export const presentStaff = (account: StaffAccount): Me => ({
  kind: account.role,
  id: account.id,
  name: account.name,
  email: account.email,
});

export function presentMe(actor: Actor): Me | null {
  if (!isSignedIn(actor)) return null;
  return actor.kind === 'student' ? presentStudent(actor.student, actor.schoolClass) : presentStaff(actor.account);
}
