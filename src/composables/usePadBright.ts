import { ref, watch } from 'vue';

const KEY = 'swaymark.pad_bright';

/** Black on white for the pad in sunlight; kept on the device. */
export function usePadBright(storage: Storage | undefined = safeStorage()) {
  const isBright = ref(storage?.getItem(KEY) === 'yes');
  watch(isBright, (now) => storage?.setItem(KEY, now ? 'yes' : 'no'));
  return isBright;
}

function safeStorage(): Storage | undefined {
  try {
    return window.localStorage;
  } catch {
    return undefined;
  }
}
