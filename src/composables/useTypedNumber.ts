import { computed, ref, watch, type Ref } from 'vue';
import { useSettings } from '@/stores/useSettings';
import { useFieldProblem } from './useFieldProblems';

/** What a text was read as: the number kept, or null, and what is not right about it. */
export interface TypedNumber {
  kept: number | null;
  problem: string | null;
}

/**
 * A number and the text it is typed as. The text stays as typed; it is written anew only when the number is
 * changed from outside.
 *
 * @param kept  the number as it is kept; null while the box is empty or cannot be read
 * @param read  reads the text; `written` puts a number as it is kept into the words of a problem
 * @param per   how many of what is kept make one of what is shown
 */
export function useTypedNumber(
  kept: Ref<number | null>,
  read: (text: string, written: (kept: number | null) => string) => TypedNumber,
  per: () => number,
) {
  const settings = useSettings();
  const written = (given: number | null): string =>
    given === null ? '' : String(given / per()).replace('.', settings.decimalMark);
  const text = ref(written(kept.value));
  const typed = computed(() => read(text.value, written));
  const { shown, leave } = useFieldProblem(() => typed.value.problem);

  watch(typed, (now) => {
    kept.value = now.kept;
  });
  watch(kept, (now) => {
    if (now !== typed.value.kept) text.value = written(now);
  });
  return { text, shown, leave };
}
