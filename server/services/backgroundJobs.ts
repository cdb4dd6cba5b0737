import type { Logger } from 'pino';

/** Work that goes on after its answer was sent. A failure is logged; a stopping server waits for the rest. */
export interface BackgroundJobs {
  start(what: string, job: () => Promise<void>): void;
  settled(): Promise<void>;
}

export function createBackgroundJobs(log: Logger): BackgroundJobs {
  const running = new Set<Promise<void>>();
  return {
    start(what, job) {
      const run = job()
        .catch((error: unknown) => log.error({ err: error }, `${what} failed`))
        .finally(() => running.delete(run));
      running.add(run);
    },
    async settled() {
      await Promise.all(running);
    },
  };
}
