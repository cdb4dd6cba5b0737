import {
  ClassCard,
  DoneAnswer,
  AcceptInviteRequest,
  ForgotRequest,
  JoinAnswer,
  JoinRequest,
  LookUpClassRequest,
  MeAnswer,
  ResetRequest,
  ReturnRequest,
  SetUpRequest,
  SignInRequest,
} from '@shared/schemas/accounts';
import { addressOf } from '../middleware/limitTries';
import { endSession, startSession } from '../middleware/startSession';
import { presentMe, presentStaff, presentStudent } from '../presenters/me';
import { joinClass } from '../services/joinClass';
import { passwordNotMatched, pinNotMatched } from '../services/signIns';
import {
  acceptInvite,
  checkPassword,
  resetPassword,
  sendResetLink,
  setUpFirstCoordinator,
} from '../services/staffAccounts';
import { checkPin, classCard, findClassByCode, pinAccount } from '../services/students';
import { route } from './route';

/** Everything a person does to come in, and to leave. */
export const doorRoutes = [
  route({
    method: 'post',
    path: '/api/classes/look-up',
    action: 'class.look_up',
    summary: 'What a class code opens, to be confirmed before joining',
    body: LookUpClassRequest,
    answer: ClassCard,
    limitTries: {},
    handler: async ({ deps, body }) => classCard(deps, await findClassByCode(deps, body.code)),
  }),
  route({
    method: 'post',
    path: '/api/join',
    action: 'class.join',
    summary: 'Join a class at a bench; the PIN is given once, here, and anew when the same join is sent again',
    body: JoinRequest,
    answer: JoinAnswer,
    limitTries: {},
    async handler({ deps, body, http }) {
      const giveBack = deps.tries.joins.take(`${body.code} ${addressOf(http.req)}`);
      const { student, schoolClass, pin } = await joinClass(deps, body).catch((error: unknown) => {
        giveBack();
        throw error;
      });
      await startSession(deps, http.req, { kind: 'student', student });
      return { me: presentStudent(student, schoolClass), pin };
    },
  }),
  route({
    method: 'post',
    path: '/api/return',
    action: 'class.return',
    summary: 'Come back to a bench with the PIN',
    body: ReturnRequest,
    answer: MeAnswer,
    limitTries: { account: pinAccount, fromAnywhere: true },
    async handler({ deps, body, http }) {
      const found = await checkPin(deps, body);
      if (!found) throw pinNotMatched();
      await startSession(deps, http.req, { kind: 'student', student: found.student });
      return { me: presentStudent(found.student, found.schoolClass) };
    },
  }),
  route({
    method: 'get',
    path: '/api/me',
    action: 'me.see',
    summary: 'Who is signed in here, or null',
    answer: MeAnswer,
    handler: ({ actor }) => ({ me: presentMe(actor) }),
  }),
  route({
    method: 'post',
    path: '/api/sign-in',
    action: 'staff.sign_in',
    summary: 'Sign in as staff',
    body: SignInRequest,
    answer: MeAnswer,
    limitTries: { account: ({ email }) => email },
    async handler({ deps, body, http }) {
      const account = await checkPassword(deps, body.email, body.password);
      if (!account) throw passwordNotMatched();
      await startSession(deps, http.req, { kind: 'staff', account });
      return { me: presentStaff(account) };
    },
  }),
  route({
    method: 'post',
    path: '/api/sign-out',
    action: 'me.sign_out',
    summary: 'End this sign-in for good',
    answer: DoneAnswer,
    async handler({ deps, http }) {
      await endSession(deps, http.req, http.res);
      return { done: true as const };
    },
  }),
  route({
    method: 'post',
    path: '/api/set-up',
    action: 'staff.set_up',
    summary: 'Make the first coordinator with the link the server printed',
    body: SetUpRequest,
    answer: MeAnswer,
    limitTries: {},
    async handler({ deps, body, http }) {
      const account = await setUpFirstCoordinator(deps, body);
      await startSession(deps, http.req, { kind: 'staff', account });
      return { me: presentStaff(account) };
    },
  }),
  route({
    method: 'post',
    path: '/api/invites/accept',
    action: 'staff.accept_invite',
    summary: 'Make a staff account with an invitation link',
    body: AcceptInviteRequest,
    answer: MeAnswer,
    limitTries: {},
    async handler({ deps, body, http }) {
      const account = await acceptInvite(deps, body);
      await startSession(deps, http.req, { kind: 'staff', account });
      return { me: presentStaff(account) };
    },
  }),
  route({
    method: 'post',
    path: '/api/password/forgot',
    action: 'staff.forgot',
    summary: 'Mail a reset link, if the address has an account; the answer is the same if not',
    body: ForgotRequest,
    answer: DoneAnswer,
    handler({ deps, body }) {
      deps.tries.resets.take(body.email);
      deps.background.start('sending a reset link', () => sendResetLink(deps, body.email));
      return { done: true as const };
    },
  }),
  route({
    method: 'post',
    path: '/api/password/reset',
    action: 'staff.reset',
    summary: 'Choose a new password with a reset link; signs the account out everywhere',
    body: ResetRequest,
    answer: DoneAnswer,
    limitTries: {},
    async handler({ deps, body }) {
      await resetPassword(deps, body.token, body.password);
      return { done: true as const };
    },
  }),
];
