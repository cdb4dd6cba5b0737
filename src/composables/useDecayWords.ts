import { useI18n } from 'vue-i18n';
import { decayConstants, decrementFrom } from '@shared/analysis/decayConstants';
import { dampingFrom, preferredLaw } from '@shared/analysis/preferredLaw';
import type { Analysis } from '@shared/schemas/analysis';
import { formatMeasured } from '@shared/units/formatMeasured';
import { radians } from '@shared/units/angle';
import { useSettings } from '@/stores/useSettings';
import { useAmplitudeWords } from './useAmplitudeWords';

/** What a run says of its decay, in words. */
export function useDecayWords() {
  const { t } = useI18n();
  const settings = useSettings();
  const { degrees } = useAmplitudeWords();

  /** One sentence on how far it fell, and one on the law. */
  function finding({ amplitude, swings, motion, small_period_s }: Analysis): string {
    if (!amplitude || !motion || !small_period_s) return t('pictures.decay.noCurve');
    const fall = t('pictures.decay.finding', {
      start: degrees(amplitude.start_deg),
      end: degrees(amplitude.end_deg),
      swings: swings ?? 0,
    });
    const { law, why } = preferredLaw(motion, small_period_s.value, radians(amplitude.start_deg.value));
    const told =
      law === null
        ? t('pictures.decay.law.not_known')
        : t(`pictures.decay.law.${why}`, { law: t(`pictures.decay.name.${law}`) });
    return `${fall} ${told}`;
  }

  function facts({ amplitude, swings, motion, small_period_s }: Analysis): { name: string; said: string }[] {
    if (!amplitude || !motion || !small_period_s || !swings) return [];
    const decrement = decrementFrom(amplitude.start_deg, amplitude.end_deg, swings);
    const damping = dampingFrom(motion, small_period_s.value);
    const { halfLifeSwings } = decayConstants(damping, radians(amplitude.start_deg.value), small_period_s.value);
    const measured = ({ value, u }: { value: number; u: number }) =>
      formatMeasured(value, 2 * u, { decimalMark: settings.decimalMark }).text;
    return [
      {
        name: t('pictures.decay.half'),
        said:
          halfLifeSwings === null
            ? t('pictures.decay.halfNever')
            : t('pictures.decay.halfAfter', { n: roughly(halfLifeSwings) }),
      },
      ...(decrement
        ? [
            { name: t('pictures.decay.decrement'), said: measured(decrement.logarithmicDecrement) },
            { name: t('pictures.decay.quality'), said: quality(decrement.logarithmicDecrement) },
          ]
        : []),
    ];
  }

  /** Q = π/δ; where δ is hardly told from nothing, only what Q is above. */
  function quality({ value, u }: { value: number; u: number }): string {
    const q = Math.PI / value;
    if (u > value / 4) return t('pictures.decay.above', { n: roughly(Math.PI / (value + 2 * u)) });
    return formatMeasured(q, (2 * u * q) / value, { decimalMark: settings.decimalMark }).text;
  }

  /** Two digits are as many as a guess at the future carries. */
  const roughly = (n: number) => String(Number(n.toPrecision(2)));

  return { finding, facts };
}
