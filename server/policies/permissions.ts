import { notAllowed, notSignedIn } from '../errors';
import type { Actor, ActorKind } from './actor';

/**
 * own: what this person made, or is. bench: the student's own bench. class: classes this person
 * owns, or the one the board pass is for. all: no bound but the sign-in.
 */
export type Scope = 'own' | 'bench' | 'class' | 'all';

type Row = Partial<Record<ActorKind, Scope>>;
const ANYBODY: Row = {
  nobody: 'all',
  board: 'all',
  student: 'all',
  volunteer: 'all',
  teacher: 'all',
  coordinator: 'all',
};
/** What a person does before being signed in, or instead of the sign-in the device has. */
const AT_THE_DOOR: Row = { nobody: 'all', student: 'all', volunteer: 'all', teacher: 'all', coordinator: 'all' };
const COORDINATOR: Row = { coordinator: 'all' };

/** The only table of rights. A route whose action is not here does not compile; who is not in a row may not. */
export const PERMISSIONS = {
  'server.health': ANYBODY,
  'server.describe': ANYBODY,
  'class.look_up': AT_THE_DOOR,
  'class.join': AT_THE_DOOR,
  'class.return': AT_THE_DOOR,
  'staff.sign_in': AT_THE_DOOR,
  'staff.set_up': AT_THE_DOOR,
  'staff.accept_invite': AT_THE_DOOR,
  'staff.forgot': AT_THE_DOOR,
  'staff.reset': AT_THE_DOOR,
  'me.see': AT_THE_DOOR,
  'me.sign_out': AT_THE_DOOR,
  'people.list': COORDINATOR,
  'people.invite': COORDINATOR,
  'people.withdraw_invite': COORDINATOR,
  'people.disable': COORDINATOR,
  'people.enable': COORDINATOR,
  'people.reset_link': COORDINATOR,
  'class.list': { teacher: 'class', coordinator: 'all' },
  'class.create': { teacher: 'own', coordinator: 'own' },
  'class.see': { teacher: 'class', coordinator: 'all' },
  'class.new_code': { teacher: 'class', coordinator: 'all' },
  'class.new_board_pass': { teacher: 'class', coordinator: 'all' },
  'student.new_pin': { teacher: 'class', coordinator: 'all' },
  'student.remove': { teacher: 'class', coordinator: 'all' },
  'runs.hand_in': { student: 'bench', volunteer: 'own', teacher: 'class', coordinator: 'class' },
  'runs.feed': { student: 'bench', volunteer: 'own', teacher: 'class', coordinator: 'all' },
  'board.see': { board: 'class' },
} as const satisfies Record<string, Row>;

export type Action = keyof typeof PERMISSIONS;

/** How far this actor's right to the action reaches; throws 401 or 403 when there is none. */
export function authorise(actor: Actor, action: Action): Scope {
  const scope = (PERMISSIONS[action] as Row)[actor.kind];
  if (scope) return scope;
  throw actor.kind === 'nobody' ? notSignedIn() : notAllowed();
}
