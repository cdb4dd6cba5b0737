import { computed, type Ref } from 'vue';
import { useI18n } from 'vue-i18n';
import { useRuns } from '@/stores/useRuns';
import { madeAt } from './runTimes';

/** One run of this device's store by its id, with the words of its head. It follows edits and receipts as they come. */
export function useRunEntry(id: Ref<string>) {
  const { t } = useI18n();
  const runs = useRuns();
  const entry = computed(() => runs.entry(id.value));

  const made = computed(() => entry.value && madeAt(entry.value.raw.made));
  const title = computed(() => (made.value ? t('run.title', { time: made.value.time }) : t('run.titleNotHere')));
  const lead = computed(() => {
    if (!entry.value || !made.value) return undefined;
    const { row, raw } = entry.value;
    const parts = [
      t(`run.kind.${raw.capture.kind}`),
      row.bench === null ? '' : t('common.bench', { n: row.bench }),
      row.author?.name ?? '',
      made.value.day,
    ];
    return parts.filter((part) => part !== '').join(' · ');
  });
  const chip = computed(() => {
    const row = entry.value?.row;
    return row?.refusal?.code === 'conflict' ? ('conflict' as const) : row?.state;
  });
  return { entry, isLoading: computed(() => !runs.isLoaded), title, lead, chip };
}
