import { useI18n } from 'vue-i18n';
import type { Flag } from '@shared/schemas/analysis';
import { formatSeconds } from '@shared/units/formatMeasured';
import { useSettings } from '@/stores/useSettings';

/** What a flag saw, in a sentence. The ends of the numbers' names say how each is told: `_s`, `_ms`, `ratio`, a count. */
export function useFlagWords() {
  const { t } = useI18n();
  const settings = useSettings();

  function shown(name: string, seen: number): string {
    if (name.endsWith('_ms')) return String(Math.round(Math.abs(seen)));
    if (!name.endsWith('_s') && name !== 'ratio') return String(seen);
    return formatSeconds(seen, { places: 2, decimalMark: settings.decimalMark });
  }

  function seenWords(flag: Flag): string {
    const key = (flag.seen.late_ms ?? 0) < 0 ? 'seenEarly' : 'seen';
    const numbers = Object.fromEntries(Object.entries(flag.seen).map(([name, seen]) => [name, shown(name, seen)]));
    return t(`run.flag.${flag.code}.${key}`, { ...numbers, mark: flag.mark ?? 0 });
  }
  return { seenWords };
}
