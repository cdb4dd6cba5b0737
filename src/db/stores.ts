import type { Me } from '@shared/schemas/accounts';
import { withDeadline } from './deadline';
import { closeStore, LocalStore, ownerKey } from './localStore';

/** Which account's store is open. One at a time; the others stay sealed on the device. */

let current: LocalStore | null = null;

/** Opens the store of this account, or the guest's for null, and closes the one before. */
export async function openStoreOf(me: Me | null): Promise<LocalStore> {
  const owner = ownerKey(me);
  if (current?.owner === owner) return current;
  if (current) closeStore(current);
  const opened = new LocalStore(owner);
  current = opened;
  await withDeadline(opened.open());
  return opened;
}

/** Asks the browser to keep what is here when space is short; it may say no. */
export async function askToKeep(storage: StorageManager | undefined): Promise<boolean> {
  try {
    return (await storage?.persist?.()) ?? false;
  } catch {
    return false;
  }
}
