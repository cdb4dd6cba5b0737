import type { ClassView } from '@shared/schemas/accounts';
import type { ClassDetails } from '../services/classes';

/** Stands for a nickname the reader has not asked to see. */
const NAME_NOT_SHOWN = '–';

export const presentClass = ({ schoolClass, students, runs, namesShown }: ClassDetails): ClassView => ({
  id: schoolClass.id,
  name: schoolClass.name,
  teacher_word: schoolClass.teacher_word,
  code: schoolClass.code,
  board_pass: schoolClass.board_pass,
  created_wall_ms: schoolClass.created_ms,
  students: students.map(({ id, bench, nickname }) => ({
    id,
    bench,
    nickname: namesShown ? nickname : NAME_NOT_SHOWN,
  })),
  runs,
});
