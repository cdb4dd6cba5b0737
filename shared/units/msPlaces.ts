/**
 * Decimals of a millisecond that a run's own scatter makes sense of: none for hands, up to three for a gate.
 *
 * @param jitter_s  standard deviation of one mark, s; null when not known
 * @example msPlaces(0.03) // 0
 */
export function msPlaces(jitter_s: number | null): number {
  if (jitter_s === null || jitter_s >= 0.002) return 0;
  return jitter_s >= 0.0002 ? 1 : jitter_s >= 0.000_02 ? 2 : 3;
}
