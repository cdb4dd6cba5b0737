import { cpSync, existsSync, mkdirSync, readdirSync, rmSync } from 'node:fs';
import { createServer, type Server } from 'node:http';
import { join } from 'node:path';
import { createApp } from '../../../server/app';
import { readConfig } from '../../../server/config';
import type { Deps } from '../../../server/deps';
import { backupDatabase, restoreDatabase } from '../../../server/services/backup';
import { createDeps } from '../../../server/start';
import { converse, type Conversation } from './byteConnection';
import { quiet, watchStatements, type StatementWatch } from './quiet';

/**
 * Where a server's process may end. mid_merge: before one of its INSERTs. before_commit: while the disk
 * takes its time over a COMMIT, which is not carried out; all that does not wait for it goes on first.
 * after_commit: carried out, and nobody told. before_answer: with the first byte of an answer.
 */
export const SERVER_POINTS = ['mid_merge', 'before_commit', 'after_commit', 'before_answer'] as const;
export type ServerPoint = (typeof SERVER_POINTS)[number];

interface Life extends StatementWatch {
  dir: string;
  deps: Deps;
  http: Server;
  conversations: Set<Conversation>;
  isAnalysing: boolean;
  unwatch(): void;
}

/**
 * The server's machine: the real application on SQLite files, whose process can end at any point. An end is
 * a kill: the files are copied as they are at that instant, the new process gets the copies and nothing
 * else, and the old one is never heard of again.
 */
export class SimServer {
  private life: Life | null = null;
  private dir: string;
  private lives = 0;
  private armed: { point: ServerPoint; nth: number } | null = null;
  private isCommitHeld = false;
  private readonly backups: string[] = [];

  /**
   * @param root      folder of this machine, removed by `dispose`
   * @param template  a data folder to begin with
   * @param now       the server's wall clock, ms
   * @param onEnd     told when its process ended at an armed point
   */
  constructor(
    private readonly root: string,
    template: string,
    private readonly now: () => number,
    private readonly onEnd: () => void,
  ) {
    this.dir = join(root, 'life-0');
    mkdirSync(root, { recursive: true });
    cpSync(template, this.dir, { recursive: true });
  }

  get isUp(): boolean {
    return this.life !== null;
  }

  /** Of the process that runs. */
  get deps(): Deps {
    if (!this.life) throw new Error('the server is down');
    return this.life.deps;
  }

  async start(): Promise<void> {
    if (this.life) return;
    const config = readConfig(
      {},
      {
        mode: 'test',
        dataDir: this.dir,
        logLevel: 'silent',
        clientDir: null,
        mail: { kind: 'none' },
        publicUrl: 'http://swaymark.test',
        rateLimits: ENOUGH,
      },
    );
    const deps = await createDeps(config, this.now);
    const life: Life = {
      dir: this.dir,
      deps,
      http: createServer(createApp(deps)),
      conversations: new Set(),
      isAnalysing: false,
      isDead: false,
      mayRun: (sql) => this.mayRun(sql),
      mayHear: (sql) => this.mayHear(sql),
      unwatch: () => undefined,
    };
    life.unwatch = watchStatements(this.dir, life);
    this.life = life;
    await deps.analyses.addMissing();
  }

  /** Arms an end at the nth time that point is passed from now on. */
  endAt(point: ServerPoint, nth: number): void {
    this.armed = { point, nth };
  }

  disarm(): void {
    this.armed = null;
  }

  /**
   * Brings a request to the server.
   *
   * @param part  share of its bytes that arrive before the connection breaks; 1 for all
   * @returns     what the server wrote before it was done or gone; null when nothing listens
   */
  async deliver(request: Buffer, part = 1): Promise<Buffer | null> {
    const { life } = this;
    if (!life) return null;
    const kept = part < 1 ? request.subarray(0, Math.floor(request.length * part)) : request;
    const conversation = converse(life.http, kept, part < 1, () => {
      if (!life.isDead && this.isNow('before_answer')) this.kill();
      return !life.isDead;
    });
    life.conversations.add(conversation);
    const answer = await conversation.answer;
    life.conversations.delete(conversation);
    return answer;
  }

  /** Waits until the server has nothing to do; a held COMMIT ends the process once all else is still. */
  async quiet(): Promise<void> {
    for (;;) {
      await quiet(() => this.isBusy());
      if (!this.isCommitHeld) return;
      this.kill();
    }
  }

  private isBusy(): boolean {
    const { life } = this;
    if (!life || this.isCommitHeld) return false;
    if (life.conversations.size > 0 || life.isAnalysing) return true;
    life.isAnalysing = true;
    void life.deps.analyses.settled().then(() => (life.isAnalysing = false));
    return false;
  }

  private isNow(point: ServerPoint): boolean {
    if (this.armed?.point !== point) return false;
    this.armed.nth -= 1;
    if (this.armed.nth > 0) return false;
    this.armed = null;
    return true;
  }

  private mayRun(sql: string): boolean {
    if (sql.startsWith('INSERT') && this.isNow('mid_merge')) this.kill();
    else if (sql.startsWith('COMMIT') && this.isNow('before_commit')) this.isCommitHeld = true;
    else return true;
    return false;
  }

  private mayHear(sql: string): boolean {
    if (!sql.startsWith('COMMIT') || !this.isNow('after_commit')) return true;
    this.kill();
    return false;
  }

  /** The process is gone, from one instruction to the next. */
  kill(): void {
    const { life } = this;
    if (!life) return;
    this.life = null;
    this.isCommitHeld = false;
    life.isDead = true;
    this.lives += 1;
    this.dir = join(this.root, `life-${this.lives}`);
    mkdirSync(this.dir);
    for (const file of readdirSync(life.dir))
      if (IS_KEPT.test(file)) cpSync(join(life.dir, file), join(this.dir, file));
    for (const conversation of life.conversations) conversation.cut();
    leave(life);
    this.onEnd();
  }

  async backUp(): Promise<void> {
    const file = join(this.root, `backup-${this.backups.length}.sqlite3`);
    await backupDatabase(this.dir, file);
    this.backups.push(file);
  }

  get backupCount(): number {
    return this.backups.length;
  }

  /** The process ends, an earlier backup takes the place of the database; it is not started. */
  async restore(which: number): Promise<void> {
    const file = this.backups[which % this.backups.length];
    if (!file) return;
    this.kill();
    await restoreDatabase(this.dir, file);
  }

  async dispose(): Promise<void> {
    this.kill();
    await quiet(() => false);
    if (existsSync(this.root)) rmSync(this.root, { recursive: true, force: true });
  }
}

/** What of a data folder outlives a process: SQLite makes the -shm files anew from the others. */
const IS_KEPT = /^(swaymark\.sqlite3|sessions\.sqlite3|session-secret)(-wal|-journal)?$/;

/** Limits by the real clock have no meaning where time is made up. */
const ENOUGH = {
  windowMs: 60_000,
  failedPerAccount: 1e6,
  failedPerAccountAnywhere: 1e6,
  failedPerAddress: 1e6,
  triesAtOnce: 1e6,
  joinsPerClass: 1e6,
  resetsPerAccount: 1e6,
  requestsPerSignIn: 1e6,
  requestsPerAddress: 1e6,
};

/** Lets go of a dead process's handles, so that ten thousand of them can be dead. */
function leave({ deps, http, dir, unwatch }: Life): void {
  const { connections } = deps.database.sequelize.connectionManager as unknown as {
    connections: Record<string, { close(done: () => void): void } | undefined>;
  };
  http.close();
  const closed = Object.values(connections).map((one) => new Promise<void>((done) => one?.close(() => done())));
  void Promise.all([...closed, deps.sessions.close().catch(() => undefined)]).then(() => {
    unwatch();
    rmSync(dir, { recursive: true, force: true });
  });
}
