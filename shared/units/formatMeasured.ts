export interface FormatOptions {
  /** '.' unless told. */
  decimalMark?: '.' | ',';
}

/**
 * A value with its standard (or expanded) uncertainty, rounded together: two significant digits of
 * the uncertainty, and the value to the same place.
 *
 * @param value  finite
 * @param u      finite, ≥ 0; with 0 the value keeps up to ten significant digits and stands alone in `text`
 * @throws {RangeError} when either is not finite or u is negative
 * @example formatMeasured(2.006412, 0.001234).text // '2.0064 ± 0.0012'
 * @see JCGM 100:2008, 7.2.6
 */
export function formatMeasured(
  value: number,
  u: number,
  { decimalMark = '.' }: FormatOptions = {},
): { value: string; u: string; text: string } {
  if (!Number.isFinite(value)) throw new RangeError(`formatMeasured: value is ${value}, it must be finite`);
  if (!(u >= 0 && u < Infinity)) throw new RangeError(`formatMeasured: u is ${u}, it must be 0 or more and finite`);
  if (u === 0) {
    const alone = withMark(plain(Number(value.toPrecision(10))), decimalMark);
    return { value: alone, u: '0', text: alone };
  }
  // toExponential first: rounding 0.0996 to 0.10 moves its first digit one place up.
  const [mantissa, power] = u.toExponential(1).split('e');
  const place = Number(power) - 1;
  const shown = withMark(roundTo(value, place), decimalMark);
  const shownU = withMark(roundTo(Number(`${mantissa}e${power}`), place), decimalMark);
  return { value: shown, u: shownU, text: `${shown} ± ${shownU}` };
}

/**
 * Seconds with a fixed number of decimal places.
 * @example formatSeconds(40.1, { places: 2, decimalMark: ',' }) // '40,10'
 */
export function formatSeconds(
  seconds: number,
  { places = 3, decimalMark = '.' }: FormatOptions & { places?: number } = {},
) {
  return withMark(seconds.toFixed(places), decimalMark);
}

/** `place` is the power of ten of the last digit kept. */
function roundTo(value: number, place: number): string {
  if (place >= 0) return plain(Math.round(value / 10 ** place) * 10 ** place);
  return -place > 100 ? '0' : value.toFixed(-place);
}

function plain(value: number): string {
  return value.toLocaleString('en-US', { useGrouping: false, maximumFractionDigits: 20 });
}

function withMark(text: string, decimalMark: '.' | ','): string {
  const unsigned = /^-0(\.0*)?$/.test(text) ? text.slice(1) : text;
  return unsigned.replace('-', '−').replace('.', decimalMark);
}
