import { Dexie, liveQuery, type EntityTable, type Observable } from 'dexie';
import { v4 as uuidv4 } from 'uuid';
import type { Me } from '@shared/schemas/accounts';

/** What this device keeps whoever is signed in: its random name, who was here last, how it is set. */

interface AppRow {
  key: string;
  content: unknown;
}

class AppStore extends Dexie {
  rows!: EntityTable<AppRow, 'key'>;

  constructor() {
    super('swaymark');
    this.version(1).stores({ rows: 'key' });
  }
}

const store = new AppStore();

async function read<T>(key: string): Promise<T | undefined> {
  return (await store.rows.get(key))?.content as T | undefined;
}

/** A random name for this device, made once. Two tabs that ask at once get the same one. */
export function deviceId(): Promise<string> {
  return store.transaction('rw', store.rows, async () => {
    const known = await read<string>('device_id');
    if (known) return known;
    const made = uuidv4();
    await store.rows.put({ key: 'device_id', content: made });
    return made;
  });
}

/** Who was signed in when the server last said so; null while nobody is. */
export async function rememberedMe(): Promise<Me | null> {
  return (await read<Me>('me')) ?? null;
}

/** Tells who is remembered, now and whenever any tab changes it. */
export const watchRememberedMe = (): Observable<Me | null> => liveQuery(rememberedMe);

export async function rememberMe(me: Me | null): Promise<void> {
  if (me) await store.rows.put({ key: 'me', content: me });
  else await store.rows.delete('me');
}

/** True while a sign-out was done with no network and the server has not heard of it. */
export async function owesSignOut(): Promise<boolean> {
  return (await read<boolean>('owes_sign_out')) ?? false;
}

export async function noteSignOutOwed(owed: boolean): Promise<void> {
  if (owed) await store.rows.put({ key: 'owes_sign_out', content: true });
  else await store.rows.delete('owes_sign_out');
}

export async function savedSettings(): Promise<Record<string, unknown>> {
  return (await read<Record<string, unknown>>('settings')) ?? {};
}

export async function saveSettings(settings: Record<string, unknown>): Promise<void> {
  await store.rows.put({ key: 'settings', content: settings });
}
