import { AppError } from '../errors';

/** Counts tries by key in windows of fixed length; kept in memory, so a restart forgives. */
export interface TryCounter {
  /** Throws 429 when the key has used up its tries. Counts nothing. */
  check(key: string): void;
  /** Counts one try, or throws 429 when the key has used up its tries. What it returns takes the count back. */
  take(key: string): () => void;
  /** Forgives the key: what was guessed at is not there any more. */
  forget(key: string): void;
}

export class TooManyTries extends AppError {
  constructor(
    readonly retryAfterS: number,
    message: string,
  ) {
    super(429, 'too_many_tries', message);
  }
}

interface Window {
  tries: number;
  endsMs: number;
}

/** @param words  what a person is told who has to wait so many minutes */
export function createTryCounter(
  limit: number,
  windowMs: number,
  now: () => number,
  words = (minutes: number) => `Too many tries did not match. Wait ${minutes} min, then try again.`,
): TryCounter {
  const windows = new Map<string, Window>();
  let sweepAt = now() + windowMs;

  function sweep(at: number): void {
    if (at < sweepAt && sweepAt - at <= windowMs) return;
    sweepAt = at + windowMs;
    for (const [key, window] of windows) if (!isOpen(window, at)) windows.delete(key);
  }

  /** A window that ends later than one could was begun before the clock was set back: it is over. */
  const isOpen = ({ endsMs }: Window, at: number) => endsMs > at && endsMs - at <= windowMs;

  function check(key: string): Window {
    const at = now();
    sweep(at);
    const there = windows.get(key);
    const window = there && isOpen(there, at) ? there : { tries: 0, endsMs: at + windowMs };
    if (window.tries < limit) return window;
    const waitS = Math.ceil((window.endsMs - at) / 1000);
    throw new TooManyTries(waitS, words(Math.ceil(waitS / 60)));
  }

  return {
    check,
    take(key) {
      const window = check(key);
      window.tries += 1;
      windows.set(key, window);
      return () => {
        window.tries -= 1;
      };
    },
    forget: (key) => void windows.delete(key),
  };
}
