import { useI18n } from 'vue-i18n';
import type { Measured } from '@shared/schemas/common';
import type { AmplitudeReading } from '@shared/schemas/rig';
import { formatMeasured } from '@shared/units/formatMeasured';
import { useSettings } from '@/stores/useSettings';

/** Amplitudes in words: as computed, in degrees; and as read, in the unit they were read in. */
export function useAmplitudeWords() {
  const { t } = useI18n();
  const settings = useSettings();
  const options = () => ({ decimalMark: settings.decimalMark });

  /** ± is twice the standard uncertainty, as everywhere a result is shown. */
  const degrees = ({ value, u }: Measured) => `${formatMeasured(value, 2 * u, options()).text}°`;

  function readingWords({ swing, as_read, u }: AmplitudeReading): string {
    const amplitude =
      as_read.form === 'angle'
        ? degrees({ value: as_read.mdeg / 1000, u: u / 1000 })
        : t('run.amplitude.sideways', {
            sideways: formatMeasured(as_read.sideways_um / 10_000, (2 * u) / 10_000, options()).text,
          });
    return swing > 0 ? t('run.amplitude.at', { amplitude, swing }) : t('run.amplitude.atStart', { amplitude });
  }
  return { degrees, readingWords };
}
