import { computed, ref, shallowRef } from 'vue';
import { useErrorWords } from './useErrorWords';

/**
 * One form: checks its fields, sends it once at a time, and keeps the server's answer beside the fields.
 *
 * @param checks  for each field path, its words for what is not right yet, or null
 * @param send    asks the server; a failure shows in words and loses nothing that was typed
 */
export function useForm<Field extends string>(checks: Record<Field, () => string | null>, send: () => Promise<void>) {
  const { words, fieldWords } = useErrorWords();
  const wasTried = ref(false);
  const isSending = ref(false);
  const failure = shallowRef<unknown>(null);

  const errors = computed(() => {
    const said = {} as Record<Field, string | null>;
    for (const path of Object.keys(checks) as Field[])
      said[path] = fieldWords(failure.value, path) ?? (wasTried.value ? checks[path]() : null);
    return said;
  });
  /** What the server said of the whole; null when it is about a field shown above. */
  const problem = computed(() => {
    if (failure.value === null) return null;
    const isAboutField = (Object.keys(checks) as Field[]).some((path) => fieldWords(failure.value, path));
    return isAboutField ? null : words(failure.value);
  });

  async function submit(): Promise<void> {
    wasTried.value = true;
    failure.value = null;
    if (isSending.value || (Object.keys(checks) as Field[]).some((path) => checks[path]())) return;
    isSending.value = true;
    try {
      await send();
    } catch (cause) {
      failure.value = cause;
    } finally {
      isSending.value = false;
    }
  }

  return { errors, problem, isSending, submit };
}
