/**
 * Quantile by straight lines between the sorted values, the median at share 0.5.
 *
 * @param values  one or more finite numbers, any order
 * @param share   0 gives the least value, 1 the largest
 * @returns       in the unit of the values
 * @throws {RangeError} when there is no value, or share is outside [0, 1]
 * @example quantile([1, 2, 3, 4], 0.25) // 1.75
 * @see Hyndman & Fan, Am. Stat. 50, 361 (1996), definition 7, doi:10.1080/00031305.1996.10473566
 */
export function quantile(values: readonly number[], share: number): number {
  if (values.length === 0) throw new RangeError('quantile: values is empty, one or more are needed');
  if (!(share >= 0 && share <= 1)) throw new RangeError(`quantile: share is ${share}, allowed is 0 to 1`);
  const sorted = Float64Array.from(values).sort();
  const place = share * (sorted.length - 1);
  const below = Math.floor(place);
  const low = sorted[below]!;
  const high = sorted[Math.ceil(place)]!;
  return low + (place - below) * (high - low);
}
