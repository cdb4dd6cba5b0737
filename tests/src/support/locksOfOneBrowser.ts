/** The Web Locks of one browser as far as the app uses them: exclusive, waiting or only if free, shared among "tabs". */
export function locksOfOneBrowser(): LockManager {
  const tails = new Map<string, Promise<unknown>>();
  const held = new Set<string>();

  async function hold(name: string, work: (lock: unknown) => unknown): Promise<unknown> {
    held.add(name);
    try {
      return await work({ name, mode: 'exclusive' });
    } finally {
      held.delete(name);
    }
  }

  return {
    request: (name: string, ...rest: unknown[]) => {
      const work = rest.at(-1) as (lock: unknown) => unknown;
      const isOptional = rest.length === 2 && (rest[0] as LockOptions).ifAvailable === true;
      if (isOptional && held.has(name)) return Promise.resolve(work(null));
      const turn = isOptional ? hold(name, work) : (tails.get(name) ?? Promise.resolve()).then(() => hold(name, work));
      tails.set(
        name,
        turn.catch(() => undefined),
      );
      return turn;
    },
    query: () => Promise.resolve({ held: [...held].map((name) => ({ name, mode: 'exclusive' })), pending: [] }),
  } as unknown as LockManager;
}
