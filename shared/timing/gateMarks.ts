import type { GateCapture } from '../schemas/run';

/**
 * One instant a block: the midpoint of blocked and cleared. The edges alone drift as the amplitude
 * falls, because half a flag passes before the centre does; their middle does not.
 *
 * @param capture  blocks as recorded
 * @returns        s since the first midpoint; two neighbours are half a swing apart
 * @example gateMarks({ block_us: [[0, 20_000], [1_000_000, 1_020_000]], … }) // [0, 1]
 */
export function gateMarks(capture: GateCapture): number[] {
  const middles = capture.block_us.map(([blocked, cleared]) => (blocked + cleared) / 2);
  return middles.map((middle) => (middle - middles[0]!) / 1e6);
}
