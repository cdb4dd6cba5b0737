import { computed } from 'vue';
import { useI18n } from 'vue-i18n';

/** A moment in words: the time of day, with the date when it was not today. */
export function useWhen(now: () => number = Date.now) {
  const { locale } = useI18n();
  const clock = computed(
    () => new Intl.DateTimeFormat(locale.value, { hour: '2-digit', minute: '2-digit', hour12: false }),
  );
  const withDate = computed(
    () =>
      new Intl.DateTimeFormat(locale.value, {
        day: 'numeric',
        month: 'short',
        hour: '2-digit',
        minute: '2-digit',
        hour12: false,
      }),
  );
  return (wall_ms: number): string => {
    const isToday = new Date(wall_ms).toDateString() === new Date(now()).toDateString();
    return (isToday ? clock : withDate).value.format(wall_ms);
  };
}
