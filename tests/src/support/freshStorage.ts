import 'fake-indexeddb/auto';
import { v4 as uuidv4 } from 'uuid';
import { LocalStore } from '@/db/localStore';

/** A store nobody used before, in the browser's (stand-in) IndexedDB. */
export const freshStore = (): LocalStore => new LocalStore(`test-${uuidv4()}`);
