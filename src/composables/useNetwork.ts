import { onScopeDispose, readonly, ref } from 'vue';

/**
 * What the browser says of the network. A hint for words on the screen and for when to try; never the
 * truth: it says "online" behind a portal page too. Only an answer of our server shows it is reached.
 *
 * @param browser  default: this window
 */
export function useNetwork(browser: Window = window) {
  const seemsOnline = ref(browser.navigator.onLine);
  const note = () => {
    seemsOnline.value = browser.navigator.onLine;
  };
  browser.addEventListener('online', note);
  browser.addEventListener('offline', note);
  onScopeDispose(() => {
    browser.removeEventListener('online', note);
    browser.removeEventListener('offline', note);
  });
  return { seemsOnline: readonly(seemsOnline) };
}
