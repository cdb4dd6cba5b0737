import { computed, getCurrentInstance, ref, shallowRef } from 'vue';
import { focusFirstWrong } from './focusFirstWrong';
import { useErrorWords } from './useErrorWords';

/**
 * One form: checks its fields, sends it once at a time, and keeps the server's answer beside the fields. After a
 * refusal the first field in error has the focus.
 *
 * @param checks  for each field path, its words for what is not right yet, or null
 * @param send    asks the server; a failure shows in words and loses nothing that was typed
 */
export function useForm<Field extends string>(checks: Record<Field, () => string | null>, send: () => Promise<void>) {
  const { words, fieldWords } = useErrorWords();
  const wasTried = ref(false);
  const isSending = ref(false);
  const failure = shallowRef<unknown>(null);
  const own = getCurrentInstance();

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
    if (isSending.value) return;
    if ((Object.keys(checks) as Field[]).some((path) => checks[path]())) return showFirst();
    isSending.value = true;
    try {
      await send();
    } catch (cause) {
      failure.value = cause;
    } finally {
      isSending.value = false;
    }
    if (failure.value !== null) await showFirst();
  }

  async function showFirst(): Promise<void> {
    const root: unknown = own?.proxy?.$el;
    if (root instanceof Element) await focusFirstWrong([root]);
  }

  return { errors, problem, isSending, submit };
}
