import type { GateCapture } from '../schemas/run';
import { quantile } from '../statistics/quantile';

/** One block as the pendulum made it, from one recorded block or from several that chatter broke it into. */
export interface Block {
  /** Indexes of the recorded blocks, the first one first. */
  pieces: number[];
  /** µs since the first blocked edge. */
  blocked: number;
  cleared: number;
}

/** Pieces lie closer together than this share of a usual block; two passes lie at least ten blocks apart. */
const CLOSEST = 0.5;
/** And together they are no longer than this many usual blocks. */
const LONGEST = 1.6;

/**
 * Puts blocks together that chatter broke apart: the beam opened for a moment at an edge or a gap of the
 * flag. The record keeps them apart.
 *
 * @param capture  blocks as recorded
 * @example mergeChatter({ block_us: [[0, 20], [1000, 1008], [1009, 1020], [2000, 2020]], … }).length // 3
 */
export function mergeChatter({ block_us }: Pick<GateCapture, 'block_us'>): Block[] {
  // Pieces are shorter than whole blocks, so the upper half tells what a block is like.
  const usual = quantile(
    block_us.map(([blocked, cleared]) => cleared - blocked),
    0.75,
  );
  const blocks: Block[] = [];
  block_us.forEach(([blocked, cleared], i) => {
    const before = blocks.at(-1);
    const isPiece = before && blocked - before.cleared < CLOSEST * usual && cleared - before.blocked < LONGEST * usual;
    if (isPiece) {
      before.pieces.push(i);
      before.cleared = cleared;
    } else blocks.push({ pieces: [i], blocked, cleared });
  });
  return blocks;
}
