import { IDBFactory as FakeFactory } from 'fake-indexeddb';

/**
 * One phone's IndexedDB, shared by its tabs. A tab that is killed loses its connections at once, as in a
 * browser: what was not committed is undone, and not one event of the database reaches it any more.
 */

/** Where a tab may end, seen from its database: as a transaction begins, after its nth request, or once it is committed. */
export type TransactionMoment = 'begin' | 'request' | 'complete';
export type OnMoment = (moment: TransactionMoment, stores: readonly string[]) => void;

interface RawTransaction extends IDBTransaction {
  _state: string;
  _requests: { request: IDBRequest }[];
  listeners: { callback: unknown }[];
}
interface RawDatabase {
  name: string;
  transactions: RawTransaction[];
  rawObjectStores: Map<string, { records: { values(): Iterable<{ value: unknown }> } }>;
  processTransactions: () => void;
}
type Connection = Omit<IDBDatabase, 'transaction'> & {
  _rawDatabase: RawDatabase;
  transaction: (...args: unknown[]) => RawTransaction;
};

/** A tab's door to the disk. */
export interface TabDisk {
  indexedDB: IDBFactory;
  kill(): void;
}

export class PhoneDisk {
  private readonly factory = new FakeFactory() as unknown as IDBFactory & { _databases: Map<string, RawDatabase> };

  /** @param onMoment  told of every writing transaction of this tab; it may kill the tab */
  open(onMoment: OnMoment): TabDisk {
    const connections = new Set<Connection>();
    const requests = new Set<IDBRequest>();
    let isDead = false;
    const follow = (connection: Connection) => {
      connections.add(connection);
      const begin = connection.transaction.bind(connection);
      connection.transaction = (...args) => {
        const transaction = begin(...args);
        if (transaction.mode === 'readwrite') watch(transaction, onMoment);
        return transaction;
      };
    };
    const open = (name: string, version?: number) => {
      if (isDead) return new EventTarget();
      const opening = this.factory.open(name, version);
      requests.add(opening);
      const opened = () => {
        requests.delete(opening);
        const connection = opening.result as unknown as Connection;
        if (isDead) connection.close();
        else follow(connection);
      };
      opening.addEventListener('upgradeneeded', () => {
        if (isDead) opening.transaction?.abort();
      });
      opening.addEventListener('success', opened);
      return opening;
    };
    const indexedDB = Object.assign(Object.create(this.factory) as IDBFactory, { open });
    return {
      indexedDB,
      kill() {
        isDead = true;
        for (const opening of requests) silence(opening);
        for (const connection of connections) drop(connection);
      },
    };
  }

  /** Names of the databases there are. */
  databases(): string[] {
    return [...this.factory._databases.keys()];
  }

  /** All rows of one object store, read past any transaction. Only while nothing is going on. */
  rows<Row>(database: string, store: string): Row[] {
    const found = this.factory._databases.get(database)?.rawObjectStores.get(store);
    return found ? [...found.records.values()].map(({ value }) => value as Row) : [];
  }
}

function watch(transaction: RawTransaction, onMoment: OnMoment): void {
  const stores = [...transaction.objectStoreNames];
  transaction.addEventListener('complete', () => onMoment('complete', stores));
  const push = transaction._requests.push.bind(transaction._requests);
  transaction._requests.push = (...added) => {
    for (const { request } of added) request?.addEventListener('success', () => onMoment('request', stores));
    return push(...added);
  };
  onMoment('begin', stores);
}

function drop(connection: Connection): void {
  const raw = connection._rawDatabase;
  const open = raw.transactions.filter((one) => (one as unknown as { db: unknown }).db === connection);
  for (const transaction of open) {
    for (const { request } of transaction._requests) silence(request);
    // The one that is just telling of its success.
    transaction.oncomplete = transaction.onabort = transaction.onerror = null;
    transaction.listeners = transaction.listeners.filter(({ callback }) => callback === raw.processTransactions);
    if (transaction._state === 'active' || transaction._state === 'inactive') transaction.abort();
  }
  connection.close();
  // Those that waited for the ones just undone.
  for (let n = 0; n <= raw.transactions.length; n += 1) raw.processTransactions();
}

function silence(request: IDBRequest | null | undefined): void {
  if (!request) return;
  request.onsuccess = request.onerror = null;
  const opening = request as IDBOpenDBRequest;
  opening.onupgradeneeded = opening.onblocked = null;
  request.dispatchEvent = () => true;
}
