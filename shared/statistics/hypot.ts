/**
 * Square root of the sum of squares: how independent standard uncertainties add up. Unlike `Math.hypot`
 * it gives the same bits in every engine.
 *
 * @param parts  of sizes whose squares neither overflow nor vanish
 */
export function hypot(...parts: number[]): number {
  let sum = 0;
  for (const part of parts) sum += part * part;
  return Math.sqrt(sum);
}
