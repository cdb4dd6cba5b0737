import { dirname } from 'node:path';
import sqlite3 from 'sqlite3';

/**
 * Knows when everything that was set going has come to rest: tasks of the stand-in IndexedDB, timers of no
 * length, statements in SQLite's threads. The simulation does one thing at a time and waits for quiet after
 * each, so the order in which threads happen to finish decides nothing.
 */

/** What a server's life has to say about its statements; see SimServer. */
export interface StatementWatch {
  isDead: boolean;
  /** False: the process ends, or hangs, before this statement is carried out. */
  mayRun(sql: string): boolean;
  /** False: the process ends after this statement was carried out and before it is told so. */
  mayHear(sql: string): boolean;
}

const watches = new Map<string, StatementWatch>();
let pending = 0;

/** Tells `watch` of every statement in the databases of that folder. */
export function watchStatements(dataDir: string, watch: StatementWatch): () => void {
  watches.set(dataDir, watch);
  return () => watches.delete(dataDir);
}

const turn = setImmediate;

/** Comes back once nothing is going on, `isBusy` included, for a few turns of the event loop. */
export async function quiet(isBusy: () => boolean): Promise<void> {
  for (let still = 0; still < 3;) {
    await new Promise<void>((resolve) => void turn(resolve));
    still = pending > 0 || isBusy() ? 0 : still + 1;
  }
}

type Work = (...args: unknown[]) => void;
const counted =
  (work: Work): Work =>
  (...args) => {
    pending -= 1;
    work(...args);
  };

const realSetTimeout = globalThis.setTimeout;
globalThis.setImmediate = ((work: Work, ...args: unknown[]) => {
  pending += 1;
  return turn(counted(work), ...args);
}) as typeof setImmediate;
globalThis.setTimeout = ((work: Work, ms?: number, ...args: unknown[]) => {
  if (ms === undefined || ms > 1) return realSetTimeout(work, ms, ...args);
  pending += 1;
  return realSetTimeout(counted(work), ms, ...args);
}) as typeof setTimeout;

type Statement = (this: sqlite3.Database, sql: string, ...rest: unknown[]) => sqlite3.Database;
const prototype = sqlite3.Database.prototype as unknown as Record<string, Statement>;
for (const method of ['run', 'all', 'get', 'exec']) {
  const real = prototype[method]!;
  prototype[method] = function (sql, ...rest) {
    const watch = watches.get(dirname((this as unknown as { filename: string }).filename));
    if (watch && (watch.isDead || !watch.mayRun(sql))) return this;
    const callback = typeof rest.at(-1) === 'function' ? (rest.pop() as Work) : undefined;
    let isHeard = false;
    pending += 1;
    return real.call(this, sql, ...rest, function (this: unknown, ...answer: unknown[]) {
      if (!isHeard) pending -= 1;
      isHeard = true;
      if (watch && (watch.isDead || !watch.mayHear(sql))) return;
      callback?.apply(this, answer);
    });
  };
}
