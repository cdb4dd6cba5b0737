import { computed, ref } from 'vue';

const KEY = 'swaymark.cautions_seen';

/** The cautions are acknowledged once a day on this device; each run made that day keeps when. */
export function useSafetySeen(
  storage: Pick<Storage, 'getItem' | 'setItem'> = localStorage,
  now: () => Date = () => new Date(),
) {
  const seen_ms = ref(Number(storage.getItem(KEY)) || null);
  const day = (when: Date) => when.toLocaleDateString('sv');
  const seenToday_ms = () =>
    seen_ms.value !== null && day(new Date(seen_ms.value)) === day(now()) ? seen_ms.value : null;
  return {
    isSeen: computed(() => seenToday_ms() !== null),
    seenToday_ms,
    see: () => {
      seen_ms.value = now().getTime();
      storage.setItem(KEY, String(seen_ms.value));
    },
  };
}
