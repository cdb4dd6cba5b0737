import { vi } from 'vitest';

/** Waits for what comes by itself; long, because a busy machine is slow and a pass does not wait it out. */
export function eventually<T>(check: () => T | Promise<T>): Promise<T> {
  return vi.waitFor(check, { timeout: 20_000, interval: 20 });
}
