/** A line to stand in: each task starts when the one before it has ended, well or badly. */
export function createMutex(): <T>(task: () => Promise<T>) => Promise<T> {
  let last: Promise<unknown> = Promise.resolve();
  return (task) => {
    const mine = last.then(task, task);
    last = mine.catch(() => undefined);
    return mine;
  };
}
