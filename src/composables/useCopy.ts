import { onScopeDispose, readonly, ref } from 'vue';

const SAY_MS = 4000;

/** Copies text and says so for a while. Where the browser does not allow it, the text stands there to be picked up. */
export function useCopy(clipboard: Pick<Clipboard, 'writeText'> | undefined = navigator.clipboard) {
  const isCopied = ref(false);
  let timer: ReturnType<typeof setTimeout> | undefined;
  onScopeDispose(() => clearTimeout(timer));

  async function copy(text: string) {
    await clipboard?.writeText(text);
    isCopied.value = true;
    clearTimeout(timer);
    timer = setTimeout(() => {
      isCopied.value = false;
    }, SAY_MS);
  }
  return { isSupported: clipboard !== undefined, isCopied: readonly(isCopied), copy };
}
