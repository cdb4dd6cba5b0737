import { useI18n } from 'vue-i18n';
import type { Flag } from '@shared/schemas/analysis';
import { formatSeconds } from '@shared/units/formatMeasured';
import { useSettings } from '@/stores/useSettings';

/** What a flag saw, in a sentence. A number named `x_s` can be told in seconds as `x_s` or in milliseconds as `x_ms`. */
export function useFlagWords() {
  const { t } = useI18n();
  const settings = useSettings();

  function shown([name, seen]: [string, number]): [string, string][] {
    const seconds = formatSeconds(seen, { places: 2, decimalMark: settings.decimalMark });
    if (name === 'ratio') return [[name, seconds]];
    if (!name.endsWith('_s')) return [[name, String(seen)]];
    return [
      [name, seconds],
      [name.replace(/_s$/, '_ms'), String(Math.round(Math.abs(seen) * 1000))],
    ];
  }

  function seenWords(flag: Flag): string {
    const key = (flag.seen.late_s ?? 0) < 0 ? 'seenEarly' : 'seen';
    const numbers = Object.fromEntries(Object.entries(flag.seen).flatMap(shown));
    return t(`run.flag.${flag.code}.${key}`, { ...numbers, mark: flag.mark ?? 0 });
  }
  return { seenWords };
}
