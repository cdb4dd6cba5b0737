import { AppError } from '../errors';

/** Counts tries by key in windows of fixed length; kept in memory, so a restart forgives. */
export interface TryCounter {
  /** Counts one try, or throws 429 when the key has used up its tries. */
  take(key: string): void;
  /** Takes the last count back: the try was a good one. */
  giveBack(key: string): void;
}

export class TooManyTries extends AppError {
  constructor(readonly retryAfterS: number) {
    const minutes = Math.ceil(retryAfterS / 60);
    super(429, 'too_many_tries', `Too many tries did not match. Wait ${minutes} min, then try again.`);
  }
}

export function createTryCounter(limit: number, windowMs: number, now: () => number): TryCounter {
  const windows = new Map<string, { tries: number; endsMs: number }>();
  let sweepAt = now() + windowMs;

  function sweep(at: number): void {
    if (at < sweepAt) return;
    sweepAt = at + windowMs;
    for (const [key, { endsMs }] of windows) if (endsMs <= at) windows.delete(key);
  }

  return {
    take(key) {
      const at = now();
      sweep(at);
      const there = windows.get(key);
      const window = there && there.endsMs > at ? there : { tries: 0, endsMs: at + windowMs };
      if (window.tries >= limit) throw new TooManyTries(Math.ceil((window.endsMs - at) / 1000));
      window.tries += 1;
      windows.set(key, window);
    },
    giveBack(key) {
      const window = windows.get(key);
      if (window && window.tries > 0) window.tries -= 1;
    },
  };
}
