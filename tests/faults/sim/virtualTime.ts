/** Time that stands still until it is moved: timers of tabs, ways through the network, restarts. */
export interface VirtualTime {
  now(): number;
  after(ms: number, work: () => void): number;
  cancel(id: number): void;
  /** Lets that much time pass; what falls due happens in order, with `rest` awaited after each. */
  pass(ms: number, rest: () => Promise<void>): Promise<void>;
}

interface Due {
  id: number;
  at: number;
  work: () => void;
}

export function createVirtualTime(): VirtualTime {
  let now = 0;
  let lastId = 0;
  const due = new Map<number, Due>();

  /** The earliest, of two at one instant the one that was asked for first. */
  function next(until: number): Due | undefined {
    let found: Due | undefined;
    for (const one of due.values()) if (one.at <= until && (!found || one.at < found.at)) found = one;
    return found;
  }

  return {
    now: () => now,
    after(ms, work) {
      const id = (lastId += 1);
      due.set(id, { id, at: now + Math.max(0, ms), work });
      return id;
    },
    cancel: (id) => void due.delete(id),
    async pass(ms, rest) {
      const until = now + ms;
      await rest();
      for (let one = next(until); one; one = next(until)) {
        due.delete(one.id);
        now = one.at;
        one.work();
        await rest();
      }
      now = until;
    },
  };
}
