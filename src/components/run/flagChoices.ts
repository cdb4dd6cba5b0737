import type { Flag } from '@shared/schemas/analysis';
import type { EditChange } from '@shared/schemas/edit';
import { MAX_SWINGS } from '@shared/schemas/limits';

export type Choice = Flag['choices'][number];

/** Choices that need words or a number first, and so open a small form instead of acting at once. */
export const asksFirst = (choice: Choice) => choice === 'set_swings' || choice === 'keep_flagged';

/** How many marks the lap has room for besides the one it ends with. */
export const missedCount = (flag: Flag) => Math.max(1, Math.round(flag.seen.count ?? 1));

/**
 * The edit a choice stands for.
 *
 * @param swings  what the person typed, for 'set_swings'
 * @returns       undefined when the flag does not name the mark or marks the edit would need
 */
export function editFor(flag: Flag, choice: Choice, swings?: number): EditChange | undefined {
  switch (choice) {
    case 'leave_out_mark':
      return flag.mark === null ? undefined : { kind: 'leave_out_mark', mark: flag.mark };
    case 'insert_gap':
      return flag.mark === null ? undefined : { kind: 'insert_gap', before_mark: flag.mark, count: missedCount(flag) };
    case 'keep_part': {
      const { from_mark, to_mark } = flag.seen;
      return from_mark === undefined || to_mark === undefined ? undefined : { kind: 'keep_part', from_mark, to_mark };
    }
    case 'reread_as_half_swings':
      return { kind: 'reread_as_half_swings' };
    case 'set_swings':
      return swings === undefined ? undefined : { kind: 'set_swings', swings };
    case 'keep_flagged':
      return { kind: 'keep_flagged', flag: flag.code, mark: flag.mark };
  }
}

/** A number of swings as typed, in steps of a half; undefined when it is not one. */
export function readSwings(typed: string): number | undefined {
  const swings = Number(typed.trim().replace(',', '.'));
  const isOne = typed.trim() !== '' && swings >= 0.5 && swings <= MAX_SWINGS && Number.isInteger(swings * 2);
  return isOne ? swings : undefined;
}
