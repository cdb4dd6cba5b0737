import { chmodSync, existsSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import { randomBytes } from 'node:crypto';
import { once } from 'node:events';
import { join } from 'node:path';
import connectSqlite3 from 'connect-sqlite3';
import type { RequestHandler } from 'express';
import session from 'express-session';
import sqlite3 from 'sqlite3';
import { isLongSecret, type Config } from '../config';
import { SIGN_IN_LIMITS } from '../services/signIns';

declare module 'express-session' {
  interface SessionData {
    /** All a session holds. Whether it still counts is for the sign_ins table to say. */
    signInId: string;
  }
}

export interface Sessions {
  middleware: RequestHandler;
  cookieName: string;
  close(): Promise<void>;
}

/** Sessions in DATA_DIR/sessions.sqlite3: never in the application's database, which has one writer. */
export async function openSessions(config: Config): Promise<Sessions> {
  const file = join(config.dataDir, 'sessions.sqlite3');
  const database = new sqlite3.Database(file);
  await once(database, 'open');
  chmodSync(file, 0o600);
  const store = new SessionStore({ db: database });
  await once(store.client, 'connect');
  const cookieName = config.isHttps ? '__Host-swaymark' : 'swaymark';
  return {
    cookieName,
    middleware: session({
      name: cookieName,
      secret: config.sessionSecrets ?? keptSecret(config.dataDir),
      store,
      resave: false,
      saveUninitialized: false,
      proxy: config.trustProxyHops > 0,
      cookie: {
        httpOnly: true,
        sameSite: 'lax',
        secure: config.isHttps,
        path: '/',
        maxAge: SIGN_IN_LIMITS.student.absoluteMs,
      },
    }),
    close: () => new Promise<void>((resolve, reject) => database.close((error) => (error ? reject(error) : resolve()))),
  };
}

/**
 * connect-sqlite3 with two of its calls replaced. Its `get` parses the row inside a native callback,
 * where a damaged row ends the process, and calls back twice after an error. Its `touch` writes on
 * every request; how long a sign-in lasts is decided in sign_ins, so there is nothing to touch.
 */
class SessionStore extends connectSqlite3(session) {
  override get(sid: string, callback: (error: unknown, found?: session.SessionData | null) => void): void {
    const sql = `SELECT sess FROM ${this.table} WHERE sid = ? AND ? <= expired`;
    this.db.get(sql, [sid, Date.now()], (error: Error | null, row?: { sess: unknown }) => {
      if (error) callback(error);
      else callback(null, row ? readSession(row.sess) : null);
    });
  }

  override touch(_sid: string, _session: session.SessionData, callback?: () => void): void {
    callback?.();
  }
}

/** A row that is not a session any more counts as no session: the person signs in again. */
function readSession(text: unknown): session.SessionData | null {
  try {
    const found = JSON.parse(String(text)) as session.SessionData | null;
    const isWhole = typeof found?.cookie === 'object' && found.cookie !== null;
    return isWhole && ['string', 'undefined'].includes(typeof found.signInId) ? found : null;
  } catch {
    return null;
  }
}

/**
 * Made once and kept readable by the server's user alone, so that a restart signs nobody out. What a
 * power cut may have left of the file counts as none: an empty secret would let anybody sign a cookie.
 */
function keptSecret(dataDir: string): string {
  const file = join(dataDir, 'session-secret');
  const kept = existsSync(file) ? readFileSync(file, 'utf8').trim() : '';
  if (isLongSecret(kept)) return kept;
  const made = randomBytes(48).toString('base64url');
  rmSync(`${file}.part`, { force: true });
  writeFileSync(`${file}.part`, made, { mode: 0o600, flush: true });
  renameSync(`${file}.part`, file);
  return made;
}
