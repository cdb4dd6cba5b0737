import type { z } from 'zod';
import type * as Accounts from '@shared/schemas/accounts';
import { request } from './client';

/** A teacher's classes, one function an endpoint. */

const schemas = () => import('@shared/schemas/accounts');
const classAnswer = () => schemas().then((module) => module.ClassAnswer);

export const getClasses = () => request('/classes', { answer: () => schemas().then((module) => module.ClassesAnswer) });

export const getClass = (id: string) => request(`/classes/${id}`, { answer: classAnswer });

export const makeClass = (body: z.input<typeof Accounts.NewClassRequest>) =>
  request('/classes', { method: 'POST', body, answer: classAnswer });

export const newClassCode = (id: string) =>
  request(`/classes/${id}/new-code`, { method: 'POST', body: {}, answer: classAnswer });

export const newBoardPass = (id: string) =>
  request(`/classes/${id}/new-board-pass`, { method: 'POST', body: {}, answer: classAnswer });

export const removeStudent = (studentId: string) =>
  request(`/students/${studentId}`, {
    method: 'DELETE',
    answer: () => schemas().then((module) => module.DoneAnswer),
  });

export const newStudentPin = (studentId: string) =>
  request(`/students/${studentId}/new-pin`, {
    method: 'POST',
    body: {},
    answer: () => schemas().then((module) => module.NewPinAnswer),
  });
