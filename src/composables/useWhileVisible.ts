import { onScopeDispose } from 'vue';

/** Does the work again and again while the page can be seen; ends with the scope. */
export function useWhileVisible(work: () => Promise<unknown>, every_ms: number, page: Document = document): void {
  const timer = setInterval(() => {
    if (!page.hidden) void work();
  }, every_ms);
  onScopeDispose(() => clearInterval(timer));
}
