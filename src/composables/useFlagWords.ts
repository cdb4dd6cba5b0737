import { useI18n } from 'vue-i18n';
import type { Flag } from '@shared/schemas/analysis';
import type { KeyedTotalCapture } from '@shared/schemas/run';
import { formatSeconds } from '@shared/units/formatMeasured';
import { useSettings } from '@/stores/useSettings';

/** What a flag saw, in a sentence. The ends of the numbers' names say how each is told: `_s`, `_ms`, `_deg`, `ratio`, a count. */
export function useFlagWords() {
  const { t } = useI18n();
  const settings = useSettings();

  function shown(name: string, seen: number): string {
    const { decimalMark } = settings;
    if (name.endsWith('_ms'))
      return formatSeconds(Math.abs(seen), { places: Math.abs(seen) < 9.95 ? 1 : 0, decimalMark });
    if (name.endsWith('_deg') || name === 'g_m_s2') return formatSeconds(seen, { places: 1, decimalMark });
    // As stated, not as measured: with all its digits and no more.
    if (name === 'round_s' || name === 'step_s') return String(seen).replace('.', decimalMark);
    if (name === 'length_m') return formatSeconds(seen, { places: 3, decimalMark });
    if (!name.endsWith('_s') && name !== 'ratio') return String(seen);
    return formatSeconds(seen, { places: 2, decimalMark });
  }

  /** `saidFirst` is what the counter of a keyed total said at the first pass: asked once, it is not asked again. */
  function seenWords(flag: Flag, saidFirst?: KeyedTotalCapture['first_count']): string {
    const key = `run.flag.${flag.code}.${keyOf(flag, saidFirst)}`;
    const numbers = Object.fromEntries(Object.entries(flag.seen).map(([name, seen]) => [name, shown(name, seen)]));
    return t(key, { ...numbers, mark: flag.mark ?? 0 }, flag.seen.readings ?? 1);
  }
  return { seenWords };
}

/** Which of a flag's sentences fits what was seen. */
function keyOf({ code, seen }: Flag, saidFirst?: KeyedTotalCapture['first_count']): string {
  if (code === 'count_from_one' && (saidFirst === 'one' || saidFirst === 'zero')) return `seenSaid.${saidFirst}`;
  if ((seen.late_ms ?? 0) < 0) return 'seenEarly';
  if (seen.scatter_ms !== undefined) return 'seenEven';
  if (seen.g_m_s2 !== undefined) return 'seenGravity';
  return seen.later_deg === undefined ? 'seen' : 'seenGrowing';
}
