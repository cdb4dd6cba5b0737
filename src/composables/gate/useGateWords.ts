import { computed, type Ref } from 'vue';
import { useI18n } from 'vue-i18n';
import { formatSeconds } from '@shared/units/formatMeasured';
import { useSettings } from '@/stores/useSettings';
import type { GateReading } from './readGate';

/** A gate reading in words: what cannot be read, row by row, and what it comes to, so that a wrong unit is seen. */
export function useGateWords(reading: Ref<GateReading | null>) {
  const { t } = useI18n();
  const settings = useSettings();

  const problems = computed(() =>
    (reading.value?.blocks?.problems ?? []).map(({ code, row, seen }) => ({
      row,
      words: t(`gate.problem.${code}`, { seen }),
    })),
  );

  const echo = computed(() => {
    const blocks = reading.value?.blocks?.block_us ?? [];
    const [first, last] = [blocks[0], blocks.at(-1)];
    if (!first || !last) return '';
    const seconds = (us: number, places: number) =>
      formatSeconds(us / 1e6, { places, decimalMark: settings.decimalMark });
    return t('gate.echo', { n: blocks.length, whole: seconds(last[1], 2), first: seconds(first[1], 4) });
  });

  return { problems, echo };
}
