import { z } from 'zod';
import { ClassAnswer, ClassesAnswer, DoneAnswer, NewClassRequest, NewPinAnswer } from '@shared/schemas/accounts';
import { Uuid } from '@shared/schemas/common';
import type { StaffActor } from '../policies/actor';
import { presentClass } from '../presenters/classView';
import { createClass, listClasses, renewBoardPass, renewCode, seeClass } from '../services/classes';
import { removeStudent, renewPin } from '../services/students';
import { route } from './route';

const ById = z.strictObject({ id: Uuid });

export const classRoutes = [
  route({
    method: 'get',
    path: '/api/classes',
    action: 'class.list',
    summary: 'Classes of a teacher; all of them, without names, for a coordinator',
    answer: ClassesAnswer,
    handler: async ({ deps, actor, scope }) => ({ classes: (await listClasses(deps, actor, scope)).map(presentClass) }),
  }),
  route({
    method: 'post',
    path: '/api/classes',
    action: 'class.create',
    summary: 'Open a class; it gets a code to join and a board link',
    body: NewClassRequest,
    answer: ClassAnswer,
    handler: async ({ deps, actor, body }) => ({
      class: presentClass(await createClass(deps, actor as StaffActor, body)),
    }),
  }),
  route({
    method: 'get',
    path: '/api/classes/:id',
    action: 'class.see',
    summary: 'One class with its people',
    params: ById,
    answer: ClassAnswer,
    handler: async ({ deps, actor, scope, params }) => ({
      class: presentClass(await seeClass(deps, actor, scope, params.id)),
    }),
  }),
  route({
    method: 'post',
    path: '/api/classes/:id/new-code',
    action: 'class.new_code',
    summary: 'Give a class another code; the old one opens nothing any more',
    params: ById,
    answer: ClassAnswer,
    handler: async ({ deps, actor, scope, params }) => ({
      class: presentClass(await renewCode(deps, actor, scope, params.id)),
    }),
  }),
  route({
    method: 'post',
    path: '/api/classes/:id/new-board-pass',
    action: 'class.new_board_pass',
    summary: 'Give a class another board link; the old one shows nothing any more',
    params: ById,
    answer: ClassAnswer,
    handler: async ({ deps, actor, scope, params }) => ({
      class: presentClass(await renewBoardPass(deps, actor, scope, params.id)),
    }),
  }),
  route({
    method: 'post',
    path: '/api/students/:id/new-pin',
    action: 'student.new_pin',
    summary: 'Give a student another PIN and end their sign-ins',
    params: ById,
    answer: NewPinAnswer,
    handler: async ({ deps, actor, scope, params }) => ({ pin: await renewPin(deps, actor, scope, params.id) }),
  }),
  route({
    method: 'delete',
    path: '/api/students/:id',
    action: 'student.remove',
    summary: 'Take out a student who has handed nothing in',
    params: ById,
    answer: DoneAnswer,
    async handler({ deps, actor, scope, params }) {
      await removeStudent(deps, actor, scope, params.id);
      return { done: true as const };
    },
  }),
];
