import { loadTexts } from '@/i18n';

/**
 * Loads what the road of a run needs, once the page has nothing better to do: after an update in another
 * tab, files of this version are gone from the cache and from the server.
 */
export function warmFieldPages(whenIdle: (work: () => void) => void = idle): void {
  whenIdle(() => {
    const parts = [
      loadTexts(),
      import('@/layouts/FieldLayout.vue'),
      import('@/layouts/PadLayout.vue'),
      import('@/pages/BenchPage.vue'),
      import('@/pages/PadPage.vue'),
      import('@/pages/RunPage.vue'),
      import('@/components/run/RunDecay.vue'),
      import('@/components/run/RunMotion.vue'),
      import('@/pages/RigPage.vue'),
      import('@/pages/HandInPage.vue'),
      import('@shared/schemas/accounts'),
      import('@shared/schemas/errors'),
      import('@shared/schemas/sync'),
    ];
    // A part that does not come is asked for again when it is needed, and says so then.
    void Promise.allSettled(parts);
  });
}

const idle = (work: () => void) =>
  'requestIdleCallback' in window ? requestIdleCallback(work) : setTimeout(work, 2_000);
