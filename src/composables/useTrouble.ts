import { readonly, ref } from 'vue';

/** Runs an action that may fail, and keeps its reason in words until the next one is tried. */
export function useTrouble() {
  const trouble = ref<string | null>(null);
  const isBusy = ref(false);

  /** @returns what the action gave, or undefined when it failed or one is still going */
  async function attempt<Answer>(action: () => Promise<Answer>): Promise<Answer | undefined> {
    if (isBusy.value) return undefined;
    isBusy.value = true;
    trouble.value = null;
    try {
      return await action();
    } catch (cause) {
      trouble.value = cause instanceof Error ? cause.message : String(cause);
      return undefined;
    } finally {
      isBusy.value = false;
    }
  }
  return { trouble: readonly(trouble), isBusy: readonly(isBusy), attempt };
}
