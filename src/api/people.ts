import type { z } from 'zod';
import type * as Accounts from '@shared/schemas/accounts';
import { request } from './client';

/** The coordinator's list of staff, one function an endpoint. */

const schemas = () => import('@shared/schemas/accounts');
const doneAnswer = () => schemas().then((module) => module.DoneAnswer);

export const getPeople = () => request('/people', { answer: () => schemas().then((module) => module.PeopleAnswer) });

export const invite = (body: z.input<typeof Accounts.InviteRequest>) =>
  request('/invites', { method: 'POST', body, answer: () => schemas().then((module) => module.InviteAnswer) });

export const withdrawInvite = (id: string) => request(`/invites/${id}`, { method: 'DELETE', answer: doneAnswer });

export const disablePerson = (id: string) =>
  request(`/people/${id}/disable`, { method: 'POST', body: {}, answer: doneAnswer });

export const enablePerson = (id: string) =>
  request(`/people/${id}/enable`, { method: 'POST', body: {}, answer: doneAnswer });

export const resetLink = (id: string) =>
  request(`/people/${id}/reset-link`, {
    method: 'POST',
    body: {},
    answer: () => schemas().then((module) => module.ResetLinkAnswer),
  });
