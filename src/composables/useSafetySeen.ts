import { computed, ref } from 'vue';

const KEY = 'swaymark.safety_seen';

/** The cautions are acknowledged once a day on this device. */
export function useSafetySeen(
  storage: Pick<Storage, 'getItem' | 'setItem'> = localStorage,
  today: () => Date = () => new Date(),
) {
  const seenOn = ref(storage.getItem(KEY));
  const day = () => today().toLocaleDateString('sv');
  return {
    isSeen: computed(() => seenOn.value === day()),
    see: () => {
      seenOn.value = day();
      storage.setItem(KEY, day());
    },
  };
}
