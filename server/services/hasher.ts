import argon2 from 'argon2';

/** Passwords and PINs as argon2id, two at a time: hashing shares its threads with SQLite. */
export interface Hasher {
  hash(secret: string): Promise<string>;
  /** Takes as long for a null hash (nobody of that name) as for a real one. `stale`: hash it anew. */
  verify(hash: string | null, secret: string): Promise<{ matches: boolean; stale: boolean }>;
}

/** OWASP Password Storage Cheat Sheet, argon2id: 19 MiB, two passes, one lane. */
const OPTIONS = { type: argon2.argon2id, memoryCost: 19 * 1024, timeCost: 2, parallelism: 1 } as const;
const AT_ONCE = 2;

export async function createHasher(): Promise<Hasher> {
  const nobody = await argon2.hash('nobody has this password', OPTIONS);
  const inTurn = createTurnstile(AT_ONCE);
  return {
    hash: (secret) => inTurn(() => argon2.hash(secret, OPTIONS)),
    verify: (hash, secret) =>
      inTurn(async () => {
        const matches = await argon2.verify(hash ?? nobody, secret);
        return { matches: matches && hash !== null, stale: hash !== null && argon2.needsRehash(hash, OPTIONS) };
      }),
  };
}

function createTurnstile(places: number): <T>(task: () => Promise<T>) => Promise<T> {
  const waiting: (() => void)[] = [];
  let free = places;
  return async (task) => {
    if (free > 0) free -= 1;
    else await new Promise<void>((resolve) => waiting.push(resolve));
    try {
      return await task();
    } finally {
      const next = waiting.shift();
      if (next) next();
      else free += 1;
    }
  };
}
