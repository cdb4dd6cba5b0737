import { computed, type ComputedRef } from 'vue';
import { useSession } from '@/stores/useSession';
import type { RunEntry } from '@/stores/useRuns';

/**
 * Whether this person may say if a run counts: whoever timed it, and staff. A student does not take back what
 * staff decided. The server has the last word; this spares people a button that would be refused.
 */
export function useMayDecide(entry: () => RunEntry): { may: ComputedRef<boolean>; mayTakeBack: ComputedRef<boolean> } {
  const session = useSession();
  const may = computed(() => {
    const { row } = entry();
    return session.isStaff || row.origin === 'mine' || row.author?.id === session.me?.id;
  });
  const mayTakeBack = computed(() => {
    const author = entry().setAside?.edit.row.author;
    return may.value && (session.isStaff || !author || author.kind === 'student');
  });
  return { may, mayTakeBack };
}
