import { TooManyTries } from './tryCounter';

/** Bounds how many tries of one key wait for their answer at a moment. */
export interface OpenTries {
  /** Lets one in, or throws 429. What it returns lets it out again. */
  enter(key: string): () => void;
}

const RETRY_AFTER_S = 5;

export function createOpenTries(limit: number): OpenTries {
  const inside = new Map<string, number>();
  return {
    enter(key) {
      const before = inside.get(key) ?? 0;
      if (before >= limit) {
        throw new TooManyTries(
          RETRY_AFTER_S,
          'Very many people come in from this network at this moment. Try again in a few seconds.',
        );
      }
      inside.set(key, before + 1);
      return () => {
        const left = inside.get(key)! - 1;
        if (left > 0) inside.set(key, left);
        else inside.delete(key);
      };
    },
  };
}
