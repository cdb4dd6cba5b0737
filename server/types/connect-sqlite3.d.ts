declare module 'connect-sqlite3' {
  import type session from 'express-session';
  import type { Database } from 'sqlite3';

  interface SQLiteStoreOptions {
    table?: string;
    db?: Database;
  }
  abstract class SQLiteStoreInstance extends session.Store {
    db: Database;
    table: string;
    client: NodeJS.EventEmitter;
    set(sid: string, session: session.SessionData, callback?: (error?: unknown) => void): void;
    destroy(sid: string, callback?: (error?: unknown) => void): void;
  }
  export default function connectSqlite3(
    connect: typeof session,
  ): new (options: SQLiteStoreOptions) => SQLiteStoreInstance;
}
