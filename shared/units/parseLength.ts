import { parseDecimal, refuse, type Parsed } from './parseDecimal';

/** Units a length can be typed in, and how many micrometres each is. */
export const UM_PER = { mm: 1_000, cm: 10_000, m: 1_000_000 } as const;
export type LengthUnit = keyof typeof UM_PER;

/**
 * Reads a length typed in a stated unit.
 *
 * @param text  a number as `parseDecimal` takes it
 * @param unit  the unit that stands beside the box
 * @returns     whole micrometres, 1 µm to 50 m; or the problem, `out_of_range` beyond that
 * @example parseLength('99,8', 'cm') // { ok: true, um: 998_000 }
 */
export function parseLength(text: string, unit: LengthUnit): Parsed<{ um: number }> {
  const typed = parseDecimal(text);
  if (!typed.ok) return typed;
  const um = Math.round(typed.value * UM_PER[unit]);
  return um >= 1 && um <= 50_000_000 ? { ok: true, um } : refuse('out_of_range', text);
}
