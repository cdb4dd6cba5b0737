import { useI18n } from 'vue-i18n';
import type { Flag } from '@shared/schemas/analysis';
import type { KeyedTotalCapture } from '@shared/schemas/run';
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

  /** `saidFirst` is what the counter of a keyed total said at the first pass: asked once, it is not asked again. */
  function seenWords(flag: Flag, saidFirst?: KeyedTotalCapture['first_count']): string {
    const key = keyOf(flag, saidFirst);
    const numbers = Object.fromEntries(Object.entries(flag.seen).map(([name, seen]) => [name, shown(name, seen)]));
    return t(`run.flag.${flag.code}.${key}`, { ...numbers, mark: flag.mark ?? 0 });
  }
  return { seenWords };
}

function keyOf({ code, seen }: Flag, saidFirst?: KeyedTotalCapture['first_count']): string {
  if (code === 'count_from_one' && (saidFirst === 'one' || saidFirst === 'zero')) return `seenSaid.${saidFirst}`;
  return (seen.late_ms ?? 0) < 0 ? 'seenEarly' : 'seen';
}
