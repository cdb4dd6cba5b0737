import { useI18n } from 'vue-i18n';
import type { Flag } from '@shared/schemas/analysis';
import { formatSeconds } from '@shared/units/formatMeasured';
import { useSettings } from '@/stores/useSettings';

/** What a flag saw, in a sentence. The numbers' names come from the check: `_s`, `_ms` and `ratio` are rounded here. */
export function useFlagWords() {
  const { t } = useI18n();
  const settings = useSettings();

  function shown(name: string, seen: number): string {
    const places = name.endsWith('_s') ? 2 : name === 'ratio' ? 1 : name.endsWith('_ms') ? 0 : undefined;
    if (places === undefined) return String(Math.round(seen * 100) / 100);
    return formatSeconds(seen, { places, decimalMark: settings.decimalMark });
  }

  function seenWords(flag: Flag): string {
    const numbers = Object.fromEntries(Object.entries(flag.seen).map(([name, seen]) => [name, shown(name, seen)]));
    return t(`run.flag.${flag.code}.seen`, { ...numbers, mark: flag.mark ?? '' });
  }
  return { seenWords };
}
