import { readonly, shallowRef } from 'vue';
import { withDeadline } from '@/db/deadline';
import type { LocalStore } from '@/db/localStore';
import { readMeta, writeMeta } from '@/db/meta';

export interface StorageState {
  /** A row was written and read back. */
  isSaving: boolean;
  /** The browser promised not to clear it by itself. */
  isPersisted: boolean;
  /** Less than this much is left, or null when the browser does not say. */
  free_bytes: number | null;
}

/** Room for far more runs than a day brings. */
export const LITTLE_BYTES = 20_000_000;

/** Whether runs can be kept here: tried by writing and reading back, not believed. */
export function useStorageState() {
  const state = shallowRef<StorageState | null>(null);

  async function look(store: LocalStore): Promise<StorageState> {
    const [isSaving, isPersisted, free_bytes] = await Promise.all([tryOut(store), persisted(), free()]);
    state.value = { isSaving, isPersisted, free_bytes };
    return state.value;
  }
  return { state: readonly(state), look };
}

async function tryOut(store: LocalStore): Promise<boolean> {
  const stamp = Date.now();
  try {
    await withDeadline(writeMeta(store, 'tried_out', stamp), 2_000);
    return (await withDeadline(readMeta<number>(store, 'tried_out'), 2_000)) === stamp;
  } catch {
    return false;
  }
}

async function persisted(): Promise<boolean> {
  try {
    return (await navigator.storage?.persisted?.()) ?? false;
  } catch {
    return false;
  }
}

async function free(): Promise<number | null> {
  try {
    const { quota, usage } = (await navigator.storage?.estimate?.()) ?? {};
    return quota === undefined || usage === undefined ? null : quota - usage;
  } catch {
    return null;
  }
}
