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

/**
 * True from asking to sign in until the server was heard: of a broken-off answer the browser may have kept
 * the cookie of somebody whom no page knows yet.
 */
export async function isCookieInDoubt(): Promise<boolean> {
  return (await read<boolean>('cookie_in_doubt')) ?? false;
}

export async function noteCookieInDoubt(inDoubt: boolean): Promise<void> {
  // Every write here is heard by all tabs, which then ask anew who is signed in.
  if ((await isCookieInDoubt()) === inDoubt) return;
  if (inDoubt) await store.rows.put({ key: 'cookie_in_doubt', content: true });
  else await store.rows.delete('cookie_in_doubt');
}

export async function savedSettings(): Promise<Record<string, unknown>> {
  return (await read<Record<string, unknown>>('settings')) ?? {};
}

export async function saveSettings(settings: Record<string, unknown>): Promise<void> {
  await store.rows.put({ key: 'settings', content: settings });
}

/** A joining on its way: what was typed, and the id it is known by. */
interface Joining {
  words: string;
  join_id: string;
}
/** More than one, for somebody who corrects a name and comes back to it. */
const MOST_JOININGS = 8;

/**
 * The id of this joining, made once: the same words sent again because no answer came, after a reload too, are
 * the same joining, and the server then tells the PIN again.
 */
export function joiningId(words: string): Promise<string> {
  return keptJoiningId(words).catch(() => {
    // A phone that keeps nothing can join all the same; the id then lasts as long as the page.
    const made = unkeptJoinings.get(words) ?? uuidv4();
    unkeptJoinings.set(words, made);
    return made;
  });
}
const unkeptJoinings = new Map<string, string>();

function keptJoiningId(words: string): Promise<string> {
  return store.transaction('rw', store.rows, async () => {
    const known = (await read<Joining[]>('joinings')) ?? [];
    const found = known.find((joining) => joining.words === words);
    if (found) return found.join_id;
    const made: Joining = { words, join_id: uuidv4() };
    await store.rows.put({ key: 'joinings', content: [...known, made].slice(-MOST_JOININGS) });
    return made.join_id;
  });
}

/** Somebody joined, and is kept here: whoever types the same words next is somebody else. */
export async function forgetJoinings(): Promise<void> {
  await store.rows.delete('joinings');
}
