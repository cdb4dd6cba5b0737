import { z } from 'zod';
import { DoneAnswer, InviteAnswer, InviteRequest, PeopleAnswer, ResetLinkAnswer } from '@shared/schemas/accounts';
import { Uuid } from '@shared/schemas/common';
import type { StaffActor } from '../policies/actor';
import { presentInvite, presentStaffMember } from '../presenters/people';
import {
  disablePerson,
  enablePerson,
  invite,
  listPeople,
  sendColleagueResetLink,
  withdrawInvite,
} from '../services/people';
import { route } from './route';

const ById = z.strictObject({ id: Uuid });
const DONE = { done: true as const };

export const peopleRoutes = [
  route({
    method: 'get',
    path: '/api/people',
    action: 'people.list',
    summary: 'Staff and open invitations',
    answer: PeopleAnswer,
    async handler({ deps }) {
      const { staff, invites } = await listPeople(deps);
      return { staff: staff.map(presentStaffMember), invites: invites.map(presentInvite) };
    },
  }),
  route({
    method: 'post',
    path: '/api/invites',
    action: 'people.invite',
    summary: 'Invite somebody as staff',
    body: InviteRequest,
    answer: InviteAnswer,
    async handler({ deps, actor, body }) {
      const made = await invite(deps, actor as StaffActor, body);
      return { invite: presentInvite(made.invite), link: made.link };
    },
  }),
  route({
    method: 'delete',
    path: '/api/invites/:id',
    action: 'people.withdraw_invite',
    summary: 'Take an invitation back',
    params: ById,
    answer: DoneAnswer,
    async handler({ deps, actor, params }) {
      await withdrawInvite(deps, actor, params.id);
      return DONE;
    },
  }),
  route({
    method: 'post',
    path: '/api/people/:id/disable',
    action: 'people.disable',
    summary: 'Shut a staff account and end its sign-ins',
    params: ById,
    answer: DoneAnswer,
    async handler({ deps, actor, params }) {
      await disablePerson(deps, actor, params.id);
      return DONE;
    },
  }),
  route({
    method: 'post',
    path: '/api/people/:id/enable',
    action: 'people.enable',
    summary: 'Open a staff account again',
    params: ById,
    answer: DoneAnswer,
    async handler({ deps, actor, params }) {
      await enablePerson(deps, actor, params.id);
      return DONE;
    },
  }),
  route({
    method: 'post',
    path: '/api/people/:id/reset-link',
    action: 'people.reset_link',
    summary: 'Give a colleague a link to choose a new password: by mail, or in the answer when no e-mail is set up',
    params: ById,
    answer: ResetLinkAnswer,
    handler: async ({ deps, actor, params }) => ({
      link: await sendColleagueResetLink(deps, actor as StaffActor, params.id),
    }),
  }),
];
