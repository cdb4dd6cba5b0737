const STEPS = 20;
const LONGEST_MS = 30;

/**
 * The smallest step of the page's clock, which is also that of input events: 5 µs to 2 ms, by browser and
 * by whether the page is isolated. Looks for some milliseconds, so ask before the run.
 *
 * @param now  the clock, ms
 * @returns    µs; 0 when the clock does not move
 */
export function clockStep(now: () => number = () => performance.now()): number {
  const start = now();
  let before = start;
  let least = Infinity;
  for (let looks = 0, seen = 0; looks < 2_000_000 && seen < STEPS; looks += 1) {
    const at = now();
    if (at === before) continue;
    least = Math.min(least, at - before);
    before = at;
    seen += 1;
    if (at - start > LONGEST_MS) break;
  }
  return least === Infinity ? 0 : Math.min(1_000_000, Math.round(least * 1000));
}
