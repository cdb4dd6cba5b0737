import type { Request } from 'express';
import type { Deps } from '../deps';
import type { Actor } from '../policies/actor';
import { actorOf } from '../services/signIns';

/** Who this request comes from: the holder of a board pass, the person signed in, or nobody. */
export async function loadActor(deps: Deps, req: Request): Promise<Actor> {
  const pass = req.get('X-Board-Pass');
  if (pass !== undefined) {
    const schoolClass = await deps.database.models.SchoolClass.findOne({ where: { board_pass: pass } });
    return schoolClass ? { kind: 'board', schoolClass } : { kind: 'nobody' };
  }
  const { signInId } = req.session;
  const actor = typeof signInId === 'string' ? await actorOf(deps, signInId) : undefined;
  return actor ?? { kind: 'nobody' };
}
