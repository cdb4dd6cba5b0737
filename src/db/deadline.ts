/** Storage did not answer in time. Some browsers never call back when they are over their limits. */
export class StorageSilent extends Error {
  override name = 'StorageSilent';
}

/**
 * A storage promise that is sure to settle.
 *
 * @param work  the promise of one storage action
 * @param ms    how long to wait for it
 */
export function withDeadline<T>(work: PromiseLike<T>, ms = 10_000): Promise<T> {
  return new Promise((resolve, reject) => {
    const timer = setTimeout(() => reject(new StorageSilent(`storage gave no answer within ${ms} ms`)), ms);
    work.then(
      (result) => {
        clearTimeout(timer);
        resolve(result);
      },
      (cause: unknown) => {
        clearTimeout(timer);
        reject(cause instanceof Error ? cause : new Error(String(cause)));
      },
    );
  });
}
