import { UPLOAD_LOCK } from './schedule';

/** The browser's locks; without them (plain http) one page is taken to be alone. */
export const browserLocks = (): Pick<LockManager, 'request'> => navigator.locks ?? aloneInTheBrowser;

/** Runs `work` while no tab uploads, and lets none begin. */
export function withUploadLock<T>(work: () => Promise<T>): Promise<T> {
  return browserLocks().request(UPLOAD_LOCK, work) as Promise<T>;
}

const aloneInTheBrowser = {
  request: (_name: string, optionsOrWork: unknown, work?: (lock: object) => unknown) =>
    Promise.resolve((work ?? (optionsOrWork as (lock: object) => unknown))({})),
} as unknown as Pick<LockManager, 'request'>;
