import {
  computed,
  getCurrentInstance,
  inject,
  onScopeDispose,
  provide,
  ref,
  shallowReactive,
  toValue,
  type InjectionKey,
  type MaybeRefOrGetter,
  type Ref,
} from 'vue';
import { focusFirstWrong } from './focusFirstWrong';

interface Field {
  /** Its problem in words, or null. */
  words: MaybeRefOrGetter<string | null>;
  /** The field's own part of the page. */
  element: () => Element | null;
}

/** What the fields of one form tell each other: whose text could not be read, and whether to say so yet. */
interface FieldProblems {
  fields: Set<Field>;
  isRevealed: Ref<boolean>;
}

const KEY: InjectionKey<FieldProblems> = Symbol('field problems');

/**
 * For the page around a form: how many fields below it hold a text that cannot be read, and a way to
 * make all of them say so at once, also those nobody has left yet, and to bring the person to the first.
 */
export function useFormProblems() {
  const problems: FieldProblems = { fields: shallowReactive(new Set()), isRevealed: ref(false) };
  provide(KEY, problems);
  return {
    count: computed(() => [...problems.fields].filter(({ words }) => toValue(words) !== null).length),
    reveal: () => {
      problems.isRevealed.value = true;
      const wrong = [...problems.fields].filter(({ words }) => toValue(words) !== null);
      void focusFirstWrong(new Set(wrong.flatMap(({ element }) => element() ?? [])));
    },
  };
}

/**
 * For a field: reports its problem to the form around it, if there is one.
 *
 * @param words  the problem in words, or null
 * @returns      the words once they should be shown: after the field was left, or when all are revealed
 */
export function useFieldProblem(words: MaybeRefOrGetter<string | null>) {
  const around = inject(KEY, null);
  const wasLeft = ref(false);
  const own = getCurrentInstance();
  const field: Field = {
    words,
    element: () => (own?.proxy?.$el instanceof Element ? own.proxy.$el : null),
  };
  around?.fields.add(field);
  onScopeDispose(() => around?.fields.delete(field));
  return {
    shown: computed(() => (wasLeft.value || around?.isRevealed.value ? toValue(words) : null)),
    leave: () => {
      wasLeft.value = true;
    },
  };
}
