import type { Finding } from './checkMarks';
import type { RunView } from './runView';

/** Blocks of a gate that were read as pieces of one, because the beam opened for a moment in between. */
export function checkChatter({ marks, capture }: RunView): Finding[] {
  if (capture.kind !== 'gate') return [];
  return marks.flatMap(({ mark, partOf }): Finding[] => {
    const [blocked, before] = [capture.block_us[mark], capture.block_us[mark - 1]];
    if (partOf === null || !blocked || !before) return [];
    return [
      {
        code: 'chatter',
        mark,
        seen: { open_ms: (blocked[0] - before[1]) / 1000 },
        choices: ['keep_flagged', 'leave_out_mark'],
      },
    ];
  });
}
