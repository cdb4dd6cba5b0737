import type { GateCapture } from '../schemas/run';
import { mergeChatter } from './mergeChatter';

/** What a gate says about one recorded block. */
export interface GateMark {
  /** s since the middle of the first block. */
  time: number;
  /** s the beam was broken. */
  blockedTime: number;
  /** The recorded block this one is a later piece of; null for a block of its own. */
  partOf: number | null;
}

/**
 * One instant a block: the midpoint of blocked and cleared. The edges alone drift as the amplitude
 * falls, because half a flag passes before the centre does; their middle does not. Of a block that
 * chatter broke apart the first piece stands for the whole.
 *
 * @param capture  blocks as recorded
 * @returns        one a recorded block; two neighbours are half a swing apart
 * @example gateMarks({ block_us: [[0, 20_000], [1_000_000, 1_020_000]], … }).map((mark) => mark.time) // [0, 1]
 */
export function gateMarks(capture: Pick<GateCapture, 'block_us'>): GateMark[] {
  const blocks = mergeChatter(capture);
  const start = (blocks[0]!.blocked + blocks[0]!.cleared) / 2;
  return blocks.flatMap(({ pieces, blocked, cleared }) =>
    pieces.map((piece, i): GateMark => {
      const [on, off] = i === 0 ? [blocked, cleared] : capture.block_us[piece]!;
      return {
        time: ((on + off) / 2 - start) / 1e6,
        blockedTime: (off - on) / 1e6,
        partOf: i === 0 ? null : pieces[0]!,
      };
    }),
  );
}
