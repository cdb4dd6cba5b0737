import type { LocalStore } from './localStore';

/** The small facts a store keeps about itself, by key. */

export async function readMeta<T>(store: LocalStore, key: string): Promise<T | undefined> {
  return (await store.meta.get(key))?.content as T | undefined;
}

export async function writeMeta(store: LocalStore, key: string, content: unknown): Promise<void> {
  await store.meta.put({ key, content });
}

/** The next number in the order this device made things. Call it inside a transaction over `meta`. */
export async function nextCreatedSeq(store: LocalStore): Promise<number> {
  const next = ((await readMeta<number>(store, 'created_seq')) ?? 0) + 1;
  await writeMeta(store, 'created_seq', next);
  return next;
}
