import { useI18n } from 'vue-i18n';
import type { RecordingPlan } from '@/db/localStore';
import { useSettings } from '@/stores/useSettings';
import { pivotToCentre } from '@shared/physics/rigLength';
import { formatSeconds as formatNumber } from '@shared/units/formatMeasured';

/** A plan in one line: what swings, how long it is, how far it was pulled, how many swings. */
export function useSetUpWords() {
  const { t } = useI18n();
  const settings = useSettings();
  const number = (value: number, places: number) =>
    formatNumber(value, { places, decimalMark: settings.decimalMark })
      .replace(/([.,]\d*?)0+$/, '$1')
      .replace(/[.,]$/, '');

  function rigWords({ rig }: RecordingPlan): string[] {
    if (!rig) return [];
    const length = pivotToCentre(rig);
    const kind = t(`common.kind.${rig.kind}`);
    return [length ? t('pad.setUp.length', { kind, length: `${number(length.value, 4)} m` }) : kind];
  }

  function amplitudeWords({ amplitudes }: RecordingPlan): string[] {
    const read = amplitudes.find(({ swing }) => swing === 0)?.as_read;
    if (!read) return [];
    const amplitude =
      read.form === 'angle' ? `${number(read.mdeg / 1000, 2)}°` : `${number(read.sideways_um / 10_000, 2)} cm`;
    return [t('pad.setUp.amplitude', { amplitude })];
  }

  return (plan: RecordingPlan) => [...rigWords(plan), ...amplitudeWords(plan)].join(', ') || t('pad.setUp.free');
}
