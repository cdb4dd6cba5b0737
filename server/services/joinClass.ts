import { randomUUID } from 'node:crypto';
import type { Transaction } from 'sequelize';
import type { Deps } from '../deps';
import { AppError } from '../errors';
import type { SchoolClass } from '../models/SchoolClass';
import { nicknameKey, type Student } from '../models/Student';
import { newPin } from './secrets';
import { revokeAllSignIns } from './signIns';
import { findClassByCode } from './students';

/** People one class and one bench may hold: a bound on what a leaked code can fill. */
const MAX_STUDENTS = 400;
const MAX_AT_BENCH = 12;

/** A join whose answer was lost can be sent again for so long. */
const AGAIN_WITHIN_MS = 15 * 60_000;

type Place = Pick<Student, 'class_id' | 'bench' | 'nickname_key'>;

/**
 * The only time the PIN is known: from here on there is its hash. Sent again with the same join_id it
 * gives the same student another PIN, because nobody has seen the first.
 */
export async function joinClass(
  deps: Deps,
  wanted: { join_id: string; code: string; bench: number; nickname: string },
): Promise<{ student: Student; schoolClass: SchoolClass; pin: string }> {
  const { join_id, code, bench, nickname } = wanted;
  const schoolClass = await findClassByCode(deps, code);
  const place = { class_id: schoolClass.id, bench, nickname_key: nicknameKey(nickname) };
  // Once before the hash, which is dear, and once where nobody can come in between.
  await sameJoinOrRoom(deps, join_id, place);
  const pin = newPin();
  const pin_hash = await deps.hasher.hash(pin);
  const student = await deps.database.writeTransaction(async (transaction) => {
    const earlier = await sameJoinOrRoom(deps, join_id, place, transaction);
    if (earlier) {
      await revokeAllSignIns(deps, earlier.id, transaction);
      return earlier.update({ pin_hash }, { transaction });
    }
    return deps.database.models.Student.create(
      { id: randomUUID(), ...place, nickname, pin_hash, join_id, created_ms: deps.now() },
      { transaction },
    );
  });
  return { student, schoolClass, pin };
}

/** The student this very join has made a moment ago; undefined when there is room for a new one; else throws. */
async function sameJoinOrRoom(
  { database, now }: Deps,
  join_id: string,
  place: Place,
  transaction?: Transaction,
): Promise<Student | undefined> {
  const { Student } = database.models;
  const { class_id, bench, nickname_key } = place;
  const earlier = await Student.findOne({ where: { join_id }, transaction });
  const isSame = earlier?.class_id === class_id && earlier.bench === bench && earlier.nickname_key === nickname_key;
  if (earlier && isSame && now() - earlier.created_ms <= AGAIN_WITHIN_MS) return earlier;
  if (earlier && !isSame) {
    throw new AppError(
      409,
      'join_used',
      'This phone has joined already, at another bench or with another nickname. Join anew to be somebody else.',
    );
  }
  if (await Student.findOne({ where: { ...place }, transaction })) {
    throw new AppError(
      409,
      'nickname_taken',
      `Somebody at bench ${bench} is called that already. If it is you, come back with your PIN; if not, take another nickname.`,
      [{ path: 'nickname', message: 'this nickname is taken at this bench' }],
    );
  }
  if ((await Student.count({ where: { class_id, bench }, transaction })) >= MAX_AT_BENCH) {
    throw new AppError(
      409,
      'bench_full',
      `Bench ${bench} has ${MAX_AT_BENCH} people, which is all it can hold. Take another bench, or tell the teacher.`,
      [{ path: 'bench', message: 'this bench is full' }],
    );
  }
  if ((await Student.count({ where: { class_id }, transaction })) >= MAX_STUDENTS) {
    throw new AppError(
      409,
      'class_full',
      `This class has ${MAX_STUDENTS} people, which is all it can hold. Tell the teacher.`,
    );
  }
  return undefined;
}
