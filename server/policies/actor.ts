import type { StaffRole } from '@shared/schemas/accounts';
import type { SchoolClass } from '../models/SchoolClass';
import type { StaffAccount } from '../models/StaffAccount';
import type { Student } from '../models/Student';

export const ACTOR_KINDS = ['nobody', 'board', 'student', 'volunteer', 'teacher', 'coordinator'] as const;
export type ActorKind = (typeof ACTOR_KINDS)[number];

/** Who a request comes from, as the database knows it at this moment. */
export interface NobodyActor {
  kind: 'nobody';
}
/** Holds a class's read-only board link. */
export interface BoardActor {
  kind: 'board';
  schoolClass: SchoolClass;
}
export interface StudentActor {
  kind: 'student';
  id: string;
  signInId: string;
  student: Student;
  schoolClass: SchoolClass;
}
export interface StaffActor {
  kind: StaffRole;
  id: string;
  signInId: string;
  account: StaffAccount;
}
export type SignedIn = StudentActor | StaffActor;
export type Actor = NobodyActor | BoardActor | SignedIn;

export const isStaff = (actor: Actor): actor is StaffActor =>
  actor.kind === 'volunteer' || actor.kind === 'teacher' || actor.kind === 'coordinator';

export const isSignedIn = (actor: Actor): actor is SignedIn => actor.kind === 'student' || isStaff(actor);
