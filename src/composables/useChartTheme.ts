import { onScopeDispose, readonly, ref } from 'vue';

/**
 * A number that rises whenever the page's look may have changed: class or attribute on html or body,
 * the system's light and dark, or its contrast setting. Charts redraw when it does.
 */
export function useChartTheme() {
  const changes = ref(0);
  const bump = () => {
    changes.value += 1;
  };
  const observer = new MutationObserver(bump);
  for (const element of [document.documentElement, document.body]) {
    observer.observe(element, { attributes: true, attributeFilter: ['class', 'style', 'data-theme'] });
  }
  const queries = ['(prefers-color-scheme: dark)', '(prefers-contrast: more)'].map((query) => matchMedia(query));
  queries.forEach((query) => query.addEventListener('change', bump));
  onScopeDispose(() => {
    observer.disconnect();
    queries.forEach((query) => query.removeEventListener('change', bump));
  });
  return readonly(changes);
}
