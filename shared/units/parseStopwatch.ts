import { MAX_RUN_US } from '../schemas/limits';
import { refuse, tidy, type Parsed } from './parseDecimal';

/**
 * Reads a stopwatch as it shows: seconds, minutes:seconds or hours:minutes:seconds, decimal point or
 * comma. The last digit shown is the reading step.
 *
 * @param text  like `40.12`, `40,12`, `0:40.12`, `1:02:03`
 * @returns     µs and the step of the last digit, µs; or the problem: empty, has_unit, not_a_time,
 *              sixty_or_more (minutes or seconds of 60 and up), too_fine (beyond µs), too_long (over twelve hours)
 * @example parseStopwatch('0:40.12') // { ok: true, us: 40_120_000, step_us: 10_000 }
 */
export function parseStopwatch(text: string): Parsed<{ us: number; step_us: number }> {
  const typed = tidy(text);
  if (typed === '') return refuse('empty', text);
  if (/^\d[\d:.,]* ?[a-z]+\.?$/i.test(typed)) return refuse('has_unit', text);
  const shown = /^(?:(?:(\d{1,3}):)?(\d{1,4}):)?(\d{1,6})(?:[.,](\d*))?$/.exec(typed);
  if (!shown) return refuse('not_a_time', text);
  const [, hours, minutes, seconds = '0', fraction = ''] = shown;
  if (fraction.length > 6) return refuse('too_fine', text);
  if ((minutes !== undefined && Number(seconds) >= 60) || (hours !== undefined && Number(minutes) >= 60)) {
    return refuse('sixty_or_more', text);
  }
  const whole = Number(hours ?? 0) * 3600 + Number(minutes ?? 0) * 60 + Number(seconds);
  const us = whole * 1_000_000 + Number(fraction.padEnd(6, '0'));
  if (us > MAX_RUN_US) return refuse('too_long', text);
  return { ok: true, us, step_us: 10 ** (6 - fraction.length) };
}
