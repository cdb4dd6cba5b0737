import { z } from 'zod';
import { Bench, Line, Uuid, WallMs } from './common';
import { hasInvisibleSigns } from './invisibleSigns';
import { MAX_BENCH } from './limits';
import { withoutSpacing } from './tidyTyped';

/** People, classes and signing in. */

export const ROLES = ['student', 'volunteer', 'teacher', 'coordinator'] as const;
export type Role = (typeof ROLES)[number];
export const StaffRole = z.enum(['volunteer', 'teacher', 'coordinator']);
export type StaffRole = z.infer<typeof StaffRole>;

/** Letters and digits that cannot be taken for one another, in six. */
export const CLASS_CODE_ALPHABET = '2346789BCDFGHJKMPQRTVWXY';
export const ClassCode = z
  .string()
  .transform((typed) => withoutSpacing(typed).toUpperCase())
  .pipe(
    z
      .string()
      .regex(new RegExp(`^[${CLASS_CODE_ALPHABET}]{6}$`), 'a class code has six letters or digits, like K4R7MP'),
  );
export const Nickname = Line.min(1, 'a nickname or roster number is needed')
  .max(24)
  .refine((typed) => !hasInvisibleSigns(typed), 'there is a sign in it that cannot be seen: type it anew');
export const Pin = z.string().regex(/^\d{6}$/, 'a PIN has six digits');
/** A PIN as a person types it. */
const TypedPin = z.string().transform(withoutSpacing).pipe(Pin);
export const Email = z
  .string()
  .trim()
  .toLowerCase()
  .pipe(z.email('an e-mail address looks like name@example.org').max(254));
export const NewPassword = z.string().min(12, 'a password needs at least 12 characters').max(128);
export const PersonName = Line.min(1, 'a name is needed').max(60);

/** Who is signed in: answered by GET /api/me and kept on the phone for use with no network. */
export const Me = z.discriminatedUnion('kind', [
  z.strictObject({
    kind: z.literal('student'),
    id: Uuid,
    nickname: Nickname,
    bench: Bench,
    class: z.strictObject({ id: Uuid, name: z.string(), teacher_word: z.string() }),
  }),
  z.strictObject({ kind: StaffRole, id: Uuid, name: PersonName, email: z.string() }),
]);
export type Me = z.infer<typeof Me>;

export const LookUpClassRequest = z.strictObject({ code: ClassCode });
export const ClassCard = z.strictObject({
  name: z.string(),
  teacher_word: z.string(),
  /** How many people are at each bench already; no names before joining. */
  benches: z.array(z.strictObject({ bench: Bench, people: z.int().min(1) })),
});
export type ClassCard = z.infer<typeof ClassCard>;
/** `join_id` is made once for one person's joining: sent again after a lost answer, it opens the same student. */
export const JoinRequest = z.strictObject({ join_id: Uuid, code: ClassCode, bench: Bench, nickname: Nickname });
/** The PIN is shown once, here. */
export const JoinAnswer = z.strictObject({ me: Me, pin: Pin });
export const ReturnRequest = z.strictObject({ code: ClassCode, bench: Bench, nickname: Nickname, pin: TypedPin });
export const MeAnswer = z.strictObject({ me: Me.nullable() });
export const SignInRequest = z.strictObject({
  email: Email,
  password: z.string().min(1, 'a password is needed').max(128),
});
export const ForgotRequest = z.strictObject({ email: Email });
export const Token = z.string().regex(/^[A-Za-z0-9_-]{32,64}$/, 'this link is not whole: copy all of it');
export const SetUpRequest = z.strictObject({ token: Token, name: PersonName, email: Email, password: NewPassword });
export const AcceptInviteRequest = z.strictObject({ token: Token, name: PersonName, password: NewPassword });
export const ResetRequest = z.strictObject({ token: Token, password: NewPassword });
export const InviteRequest = z.strictObject({ email: Email, role: StaffRole });

export const StaffMember = z.strictObject({
  id: Uuid,
  name: z.string(),
  email: z.string(),
  role: StaffRole,
  disabled: z.boolean(),
});
export type StaffMember = z.infer<typeof StaffMember>;
export const PendingInvite = z.strictObject({ id: Uuid, email: z.string(), role: StaffRole, expires_wall_ms: WallMs });
export type PendingInvite = z.infer<typeof PendingInvite>;
/** `link` is given only when the server has no e-mail set up, for the coordinator to pass on by hand. */
export const InviteAnswer = z.strictObject({ invite: PendingInvite, link: z.string().nullable() });
/** `link` is null when it was mailed; else it is shown once, for the coordinator to pass on by hand. */
export const ResetLinkAnswer = z.strictObject({ link: z.string().nullable() });
export const NewPinAnswer = z.strictObject({ pin: Pin });
export const PeopleAnswer = z.strictObject({ staff: z.array(StaffMember), invites: z.array(PendingInvite) });

export const NewClassRequest = z.strictObject({
  name: Line.min(1, 'a class needs a name').max(60),
  /** A word the teacher says aloud, shown before joining so nobody joins the wrong class. */
  teacher_word: Line.min(1, 'a word to say aloud is needed').max(30),
});
export const ClassView = z.strictObject({
  id: Uuid,
  name: z.string(),
  teacher_word: z.string(),
  code: z.string(),
  board_pass: z.string(),
  created_wall_ms: WallMs,
  students: z.array(z.strictObject({ id: Uuid, bench: Bench, nickname: z.string() })),
  runs: z.int().min(0),
});
export type ClassView = z.infer<typeof ClassView>;
export const ClassesAnswer = z.strictObject({ classes: z.array(ClassView) });
export const ClassAnswer = z.strictObject({ class: ClassView });

/** One dot on the Board: a bench's run, no names. */
export const BoardPoint = z.strictObject({
  run_id: Uuid,
  bench: z.int().min(1).max(MAX_BENCH),
  /** `expanded_u` is what the Desk states: coverage factor times u. */
  small_period_s: z.strictObject({ value: z.number(), u: z.number(), expanded_u: z.number() }).nullable(),
  length_m: z.number().nullable(),
  open_flags: z.int().min(0),
  /** Set aside: it is to be taken off the Board. Such a point comes without its figures. */
  set_aside: z.literal(true).optional(),
});
export type BoardPoint = z.infer<typeof BoardPoint>;
export const BoardAnswer = z.strictObject({
  class_name: z.string(),
  code: z.string(),
  server_wall_ms: WallMs,
  cursor: z.int().min(0),
  /** All points when `after` was 0, else those that are new or changed since. */
  points: z.array(BoardPoint),
});
export type BoardAnswer = z.infer<typeof BoardAnswer>;
export const DoneAnswer = z.strictObject({ done: z.literal(true) });
