import { computed, ref, watch, type Ref } from 'vue';
import { useI18n } from 'vue-i18n';
import type { RecordingPlan } from '@/db/localStore';
import type { PadView } from './useRecorder';

/** What the pad says, seen and heard. The count is said every five, so that it does not talk over the next tap. */
export function usePadWords(view: Readonly<Ref<PadView>>, plan: RecordingPlan) {
  const { t } = useI18n();
  const step = Math.max(1, plan.swings_per_mark);
  const mode = plan.swings_per_mark === 0.5 ? 'pass' : plan.swings_per_mark === 1 ? 'swing' : 'every';

  /** The number the tapper says: passes when every pass is tapped, swings otherwise. */
  const said = computed(() => (view.value.count < 0 ? null : view.value.count * step));
  const heard = ref('');
  const lastDone = ref('');

  const armed = computed(() => t(`pad.armed.${mode}`, { every: step }).split('\n'));
  const left = computed(() => {
    const { phase, swingsLeft, count } = view.value;
    if (phase === 'saving' || phase === 'saved') return t('pad.saving');
    if (phase === 'grace') return t('pad.grace', { swings: plan.planned_swings });
    if (count < 0) return plan.planned_swings === null ? t('pad.open') : t('pad.planned', { n: plan.planned_swings });
    return swingsLeft === null ? '' : t('pad.left', { n: Math.ceil(swingsLeft) });
  });
  const padLabel = computed(() => t(`pad.label.${mode}`, { count: said.value ?? t('pad.none') }));

  function did(what: 'undone' | 'missed', number: number) {
    lastDone.value = t(`pad.${what}`, { number });
    heard.value = lastDone.value;
  }

  /** A contact that became no mark: said quietly, and the count stays. A frame later, so that the tap just before it has been shown. */
  function notCounted(why: 'bounce' | 'palm') {
    requestAnimationFrame(() => {
      lastDone.value = t(`pad.notCounted.${why}`);
      heard.value = lastDone.value;
    });
  }

  watch(view, (now, before) => {
    if (now.count > before.count) lastDone.value = '';
    if (now.phase === 'grace' && before.phase !== 'grace') heard.value = left.value;
    else if (now.phase === 'saved') heard.value = t('pad.savedHeard');
    else if (now.count > before.count && now.count % 5 === 0) heard.value = String(said.value);
  });

  return { armed, left, padLabel, said, heard, lastDone, did, notCounted, step };
}
