/** The Web Locks of one browser: exclusive, shared among its tabs, let go of when a tab ends. */

interface Asked {
  tab: object;
  name: string;
  grant: () => void;
}

export class PhoneLocks {
  private readonly held = new Map<string, Asked>();
  private waiting: Asked[] = [];

  /** `navigator.locks` of one tab. */
  of(tab: object): LockManager {
    const request = (name: string, ...rest: unknown[]) => {
      const work = rest.at(-1) as (lock: object | null) => unknown;
      const ifAvailable = rest.length === 2 && (rest[0] as LockOptions).ifAvailable === true;
      if (ifAvailable && this.held.has(name)) return Promise.resolve(work(null));
      return new Promise((resolve, reject) => {
        const asked: Asked = {
          tab,
          name,
          grant: () => {
            this.held.set(name, asked);
            const ended = () => this.release(asked);
            void Promise.resolve()
              .then(() => work({ name, mode: 'exclusive' }))
              .then(resolve, reject)
              .finally(ended);
          },
        };
        this.waiting.push(asked);
        this.grantNext(name);
      });
    };
    const query = () => Promise.resolve({ held: [...this.held.keys()].map((name) => ({ name })), pending: [] });
    return { request, query } as unknown as LockManager;
  }

  /** A tab is gone, with all it held and waited for. */
  leave(tab: object): void {
    this.waiting = this.waiting.filter((asked) => asked.tab !== tab);
    for (const asked of [...this.held.values()]) if (asked.tab === tab) this.release(asked);
  }

  private release(asked: Asked): void {
    if (this.held.get(asked.name) !== asked) return;
    this.held.delete(asked.name);
    this.grantNext(asked.name);
  }

  private grantNext(name: string): void {
    if (this.held.has(name)) return;
    const next = this.waiting.find((asked) => asked.name === name);
    if (!next) return;
    this.waiting = this.waiting.filter((asked) => asked !== next);
    next.grant();
  }
}
