import type { Author } from '@shared/schemas/sync';
import type { Deps } from '../deps';
import { selectWhereIn } from '../models/selectWhereIn';
import type { SignedIn } from '../policies/actor';

interface StudentName {
  id: string;
  nickname: string;
  owner_id: string;
}
interface StaffName {
  id: string;
  name: string;
  role: Exclude<Author['kind'], 'student'>;
}

/**
 * Authors by id, with the name where this reader may see it: bench mates and a class's own teacher
 * see nicknames, everybody sees the names of staff, a coordinator reading another's class sees none.
 */
export async function createNameBook(
  { database }: Deps,
  reader: SignedIn,
  ids: readonly string[],
): Promise<(id: string) => Author> {
  const wanted = [...new Set(ids)];
  const students = await selectWhereIn<StudentName>(
    database,
    'SELECT s.id, s.nickname, c.owner_id FROM students s JOIN classes c ON c.id = s.class_id',
    's.id',
    wanted,
  );
  const staff = await selectWhereIn<StaffName>(database, 'SELECT id, name, role FROM staff_accounts', 'id', wanted);
  const authors = new Map<string, Author>([
    ...students.map(({ id, nickname, owner_id }): [string, Author] => {
      const isShown = reader.kind === 'student' || owner_id === reader.id;
      return [id, { kind: 'student', id, name: isShown ? nickname : null }];
    }),
    ...staff.map(({ id, name, role }): [string, Author] => [id, { kind: role, id, name }]),
  ]);
  // A student can be taken out while what they handed in last was on its way.
  return (id) => authors.get(id) ?? { kind: 'student', id, name: null };
}
