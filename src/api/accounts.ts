import type { z } from 'zod';
import type * as Accounts from '@shared/schemas/accounts';
import { request } from './client';

/** Signing in and out, one function an endpoint. */

type In<Schema extends z.ZodType> = z.input<Schema>;
const schemas = () => import('@shared/schemas/accounts');
const meAnswer = () => schemas().then((module) => module.MeAnswer);
const doneAnswer = () => schemas().then((module) => module.DoneAnswer);

export const getMe = () => request('/me', { answer: meAnswer, timeout_ms: 8_000 });

export const lookUpClass = (body: In<typeof Accounts.LookUpClassRequest>) =>
  request('/classes/look-up', { method: 'POST', body, answer: () => schemas().then((module) => module.ClassCard) });

export const join = (body: In<typeof Accounts.JoinRequest>) =>
  request('/join', { method: 'POST', body, answer: () => schemas().then((module) => module.JoinAnswer) });

export const comeBack = (body: In<typeof Accounts.ReturnRequest>) =>
  request('/return', { method: 'POST', body, answer: meAnswer });

export const signIn = (body: In<typeof Accounts.SignInRequest>) =>
  request('/sign-in', { method: 'POST', body, answer: meAnswer });

export const signOut = () => request('/sign-out', { method: 'POST', body: {}, answer: doneAnswer, timeout_ms: 6_000 });

export const setUp = (body: In<typeof Accounts.SetUpRequest>) =>
  request('/set-up', { method: 'POST', body, answer: meAnswer });

export const acceptInvite = (body: In<typeof Accounts.AcceptInviteRequest>) =>
  request('/invites/accept', { method: 'POST', body, answer: meAnswer });

export const forgotPassword = (body: In<typeof Accounts.ForgotRequest>) =>
  request('/password/forgot', { method: 'POST', body, answer: doneAnswer });

export const resetPassword = (body: In<typeof Accounts.ResetRequest>) =>
  request('/password/reset', { method: 'POST', body, answer: doneAnswer });
