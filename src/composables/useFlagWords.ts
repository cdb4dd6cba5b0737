import { useI18n } from 'vue-i18n';
import type { Flag } from '@shared/schemas/analysis';
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

  function seenWords(flag: Flag): string {
    const numbers = Object.fromEntries(Object.entries(flag.seen).map(([name, seen]) => [name, shown(name, seen)]));
    return t(`run.flag.${flag.code}.${variantOf(flag)}`, { ...numbers, mark: flag.mark ?? 0 }, flag.seen.readings ?? 1);
  }
  return { seenWords };
}

/** Which of a flag's sentences fits what was seen. */
function variantOf({ seen }: Flag): string {
  if ((seen.late_ms ?? 0) < 0) return 'seenEarly';
  if (seen.scatter_ms !== undefined) return 'seenEven';
  if (seen.g_m_s2 !== undefined) return 'seenGravity';
  return seen.later_deg === undefined ? 'seen' : 'seenGrowing';
}
