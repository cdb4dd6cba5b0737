import type * as argon2Module from 'argon2';
import { vi } from 'vitest';

/**
 * argon2 with its smallest costs in place of ours: hashing is not what these tests are about, and a
 * schedule signs in several times. server/services/hasher itself is the real one.
 */
vi.mock('argon2', async (original) => {
  const { default: argon2 } = await original<{ default: typeof argon2Module }>();
  const cheap = { memoryCost: 8, timeCost: 1, parallelism: 1 };
  return {
    default: {
      ...argon2,
      hash: (secret: string, options: object) => argon2.hash(secret, { ...options, ...cheap }),
      needsRehash: () => false,
    },
  };
});
