import { randomUUID } from 'node:crypto';
import type { Deps } from '../deps';
import { notFound } from '../errors';
import type { SchoolClass } from '../models/SchoolClass';
import type { Student } from '../models/Student';
import type { Actor, StaffActor } from '../policies/actor';
import { isSignedIn } from '../policies/actor';
import type { Scope } from '../policies/permissions';
import { noteActivity } from './activity';
import { newClassCode, newToken } from './secrets';

/** A class with what its page lists. `namesShown` is false where this reader has not asked for names. */
export interface ClassDetails {
  schoolClass: SchoolClass;
  students: Student[];
  runs: number;
  namesShown: boolean;
}

/** A class this actor may reach; one that is another's is not told apart from one that is not there. */
export async function classInScope(
  { database }: Deps,
  actor: Actor,
  scope: Scope,
  id: string,
  what = 'This class',
): Promise<SchoolClass> {
  const schoolClass = await database.models.SchoolClass.findByPk(id);
  if (!schoolClass || (scope !== 'all' && !owns(actor, schoolClass))) throw notFound(what);
  return schoolClass;
}

/** Names stay with the class's own teacher: in this list a coordinator sees benches only. */
export async function listClasses(deps: Deps, actor: Actor, scope: Scope): Promise<ClassDetails[]> {
  const where = scope === 'all' || !isSignedIn(actor) ? {} : { owner_id: actor.id };
  const classes = await deps.database.models.SchoolClass.findAll({ where, order: [['created_ms', 'ASC']] });
  return Promise.all(classes.map((schoolClass) => details(deps, schoolClass, owns(actor, schoolClass))));
}

/** One class, with names. That a coordinator looked at another's is written down. */
export async function seeClass(deps: Deps, actor: Actor, scope: Scope, id: string): Promise<ClassDetails> {
  const schoolClass = await classInScope(deps, actor, scope, id);
  if (!owns(actor, schoolClass)) {
    await deps.database.writeTransaction((transaction) =>
      noteActivity(deps, actor, 'class.see_names', id, transaction),
    );
  }
  return details(deps, schoolClass, true);
}

export async function createClass(
  deps: Deps,
  actor: StaffActor,
  wanted: { name: string; teacher_word: string },
): Promise<ClassDetails> {
  const code = await freeCode(deps);
  const schoolClass = await deps.database.writeTransaction((transaction) =>
    deps.database.models.SchoolClass.create(
      {
        id: randomUUID(),
        owner_id: actor.id,
        ...wanted,
        code,
        board_pass: newToken(),
        created_ms: deps.now(),
      },
      { transaction },
    ),
  );
  return { schoolClass, students: [], runs: 0, namesShown: true };
}

/** The old code opens nothing any more; who is signed in stays so. */
export async function renewCode(deps: Deps, actor: Actor, scope: Scope, id: string): Promise<ClassDetails> {
  return change(deps, actor, scope, id, 'class.new_code', { code: await freeCode(deps) });
}

/** The old board link shows nothing any more. */
export async function renewBoardPass(deps: Deps, actor: Actor, scope: Scope, id: string): Promise<ClassDetails> {
  return change(deps, actor, scope, id, 'class.new_board_pass', { board_pass: newToken() });
}

async function change(
  deps: Deps,
  actor: Actor,
  scope: Scope,
  id: string,
  action: string,
  fields: { code?: string; board_pass?: string },
): Promise<ClassDetails> {
  const schoolClass = await classInScope(deps, actor, scope, id);
  await deps.database.writeTransaction(async (transaction) => {
    await schoolClass.update(fields, { transaction });
    await noteActivity(deps, actor, action, id, transaction);
  });
  return details(deps, schoolClass, owns(actor, schoolClass));
}

async function details({ database }: Deps, schoolClass: SchoolClass, namesShown: boolean): Promise<ClassDetails> {
  const [students, runs] = await Promise.all([
    database.models.Student.findAll({
      where: { class_id: schoolClass.id },
      order: [
        ['bench', 'ASC'],
        ['nickname_key', 'ASC'],
      ],
    }),
    database.models.Run.count({ where: { class_id: schoolClass.id } }),
  ]);
  return { schoolClass, students, runs, namesShown };
}

/** A code no class has. With 191 million of them the second try is rare. */
async function freeCode({ database }: Deps): Promise<string> {
  for (;;) {
    const code = newClassCode();
    if (!(await database.models.SchoolClass.findOne({ where: { code } }))) return code;
  }
}

const owns = (actor: Actor, schoolClass: SchoolClass) => isSignedIn(actor) && schoolClass.owner_id === actor.id;
