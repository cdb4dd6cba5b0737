import { computed } from 'vue';
import { useI18n } from 'vue-i18n';
import { useSync } from '@/stores/useSync';

/** When this device last heard from the server, in words; `isOld` while it cannot reach it. */
export function useContactWords() {
  const { t } = useI18n();
  const sync = useSync();
  const isOld = computed(() => sync.state === 'unreachable' || sync.state === 'signed_out');
  const when = computed(() =>
    sync.lastContact_wall_ms === null
      ? null
      : new Intl.DateTimeFormat('en-GB', { hour: '2-digit', minute: '2-digit' }).format(sync.lastContact_wall_ms),
  );
  const words = computed(() => {
    if (when.value === null) return t('desk.never');
    return t(isOld.value ? 'desk.noContact' : 'desk.contact', { when: when.value });
  });
  return { words, when, isOld };
}
