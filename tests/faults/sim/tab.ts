import { Dexie, liveQuery, type DexieOptions } from 'dexie';
import { IDBFactory, IDBKeyRange } from 'fake-indexeddb';
import type { Exchange } from './network';
import type { Page } from './page';
import type { Phone } from './phone';
import type { TransactionMoment } from './phoneDisk';
import type { TabCode } from './tabCode';

/**
 * Where a tab may end. With `stores`: in a writing transaction over just these; the marks of an answer count
 * only after an answer to a hand-in was read.
 */
export const TAB_POINTS = {
  before_tap_write: { moment: 'begin', with: 'recordingEvents' },
  after_tap_write: { moment: 'complete', with: 'recordingEvents' },
  before_finish_commit: { moment: 'request', stores: 'meta recordings runs' },
  after_finish_commit: { moment: 'complete', stores: 'meta recordings runs' },
  request_half_sent: { moment: 'sending' },
  answer_before_read: { moment: 'answered' },
  read_before_mark: { moment: 'begin', stores: 'edits runs' },
  in_mark: { moment: 'request', stores: 'edits runs' },
  after_mark: { moment: 'complete', stores: 'edits runs' },
  in_feed: { moment: 'request', stores: 'analyses edits meta runs' },
  in_claim_or_epoch: { moment: 'request', stores: 'edits meta runs' },
  after_claim_or_epoch: { moment: 'complete', stores: 'edits meta runs' },
} as const satisfies Record<string, { moment: TabMoment; stores?: string; with?: string }>;
type TabMoment = TransactionMoment | 'sending' | 'answered';
export type TabPoint = keyof typeof TAB_POINTS;

const FRAME_MS = 16;

interface Closable {
  close(): void;
}

// Every store is given its phone's own; a live query only looks whether there is any at all.
Dexie.dependencies.indexedDB = new IDBFactory();

/** One open page of a phone. Once it is killed nothing it still does reaches anything. */
export class Tab {
  readonly page: Page;
  isDead = false;
  private readonly timers = new Set<number>();
  private readonly exchanges = new Set<Exchange>();
  private readonly databases: Closable[] = [];
  private readonly liveQueries: { unsubscribe(): void }[] = [];
  private readonly disk;
  private readonly openedAt: number;
  private armed: { point: TabPoint; nth: number } | null = null;
  /** The last hand-in of this tab was answered, and what the answer says may still have to be written down. */
  private isAnswered = false;

  constructor(
    readonly phone: Phone,
    code: TabCode,
  ) {
    this.openedAt = phone.world.time.now();
    this.disk = phone.disk.open((moment, stores) => this.onMoment(moment, stores));
    this.page = code(this.globals());
  }

  /** Arms an end at the nth time that point is passed. */
  endAt(point: TabPoint, nth: number): void {
    this.armed = { point, nth };
  }

  disarm(): void {
    this.armed = null;
  }

  /** A request begins to leave, or its answer is there. True if this tab was to end just then; it has ended. */
  endsAt(moment: 'sending' | 'answered', path: string): boolean {
    if (path.startsWith('/api/sync')) this.isAnswered = moment === 'answered';
    return this.armed !== null && TAB_POINTS[this.armed.point].moment === moment && this.endsNow();
  }

  /** The page is gone: closed, crashed, or killed by the system. */
  kill(): void {
    if (this.isDead) return;
    this.isDead = true;
    this.phone.world.note(`a tab of phone ${this.phone.index} ends`);
    this.disk.kill();
    for (const timer of this.timers) this.phone.world.time.cancel(timer);
    for (const exchange of this.exchanges) exchange.leave();
    this.phone.locks.leave(this);
    this.phone.forget(this);
    for (const query of this.liveQueries) query.unsubscribe();
    for (const database of this.databases) database.close();
  }

  /** ms since the page was opened. */
  now(): number {
    return this.phone.world.time.now() - this.openedAt;
  }

  private onMoment(moment: TransactionMoment, stores: readonly string[]): void {
    if (!this.armed) return;
    const point: { moment: TabMoment; stores?: string; with?: string } = TAB_POINTS[this.armed.point];
    const isHere = point.with ? stores.includes(point.with) : point.stores === [...stores].sort().join(' ');
    const isInTime = point.stores !== 'edits runs' || this.isAnswered;
    if (point.moment === moment && isHere && isInTime) this.endsNow();
  }

  private endsNow(): boolean {
    this.armed!.nth -= 1;
    if (this.armed!.nth > 0) return false;
    this.armed = null;
    this.kill();
    return true;
  }

  private globals(): Record<string, unknown> {
    const { phone } = this;
    const { world } = phone;
    const setTimer = (work: () => void, ms = 0): number => {
      if (this.isDead) return 0;
      const id = world.time.after(ms, () => {
        this.timers.delete(id);
        if (!this.isDead) work();
      });
      this.timers.add(id);
      return id;
    };
    const clearTimer = (id: number) => {
      this.timers.delete(id);
      world.time.cancel(id);
    };
    const { indexedDB } = this.disk;
    const { databases } = this;
    class TabDexie extends Dexie {
      constructor(name: string, options: DexieOptions = {}) {
        super(`${phone.name}/${name}`, { ...options, indexedDB, IDBKeyRange });
        databases.push(this as unknown as Closable);
      }
    }
    class PhoneDate extends Date {
      constructor(...given: unknown[]) {
        super(...((given.length === 0 ? [phone.wall()] : given) as [number]));
      }
      static override now = () => phone.wall();
    }
    const window = Object.assign(new EventTarget(), { isSecureContext: true, crossOriginIsolated: false });
    const document = Object.assign(new EventTarget(), { hidden: false, visibilityState: 'visible' });
    const globals = {
      window,
      document,
      navigator: { locks: phone.locks.of(this), onLine: true, userAgent: 'simulated' },
      localStorage: phone.localStorage,
      fetch: (path: string, init: RequestInit = {}) => this.fetch(path, init),
      setTimeout: setTimer,
      clearTimeout: clearTimer,
      setInterval: () => 0,
      clearInterval: () => undefined,
      requestAnimationFrame: (paint: () => void) => setTimer(paint, FRAME_MS),
      performance: { now: () => this.now(), timeOrigin: 0 },
      crypto: { getRandomValues: fillFrom(world.random), subtle: crypto.subtle },
      Date: PhoneDate,
      Math: Object.assign(Object.create(Math) as Math, { random: world.random }),
      dexie: { Dexie: TabDexie, liveQuery: (query: () => unknown) => this.liveQuery(query) },
    };
    const all: unknown = Object.create(globalThis, Object.getOwnPropertyDescriptors(globals));
    return { ...globals, globalThis: all, self: all };
  }

  /** Dexie's live queries outlive their databases; those of a tab end with it. */
  private liveQuery(query: () => unknown) {
    const observable = liveQuery(query);
    return {
      subscribe: (next: (found: unknown) => void) => {
        const subscription = observable.subscribe(next);
        this.liveQueries.push(subscription);
        return subscription;
      },
    };
  }

  private fetch(path: string, init: RequestInit): Promise<Response> {
    if (this.isDead) return new Promise(() => undefined);
    return new Promise((resolve, reject) => {
      const exchange = this.phone.network.begin(this, path, init, {
        resolve: (response) => {
          this.exchanges.delete(exchange);
          if (!this.isDead) resolve(response);
        },
        reject: (error) => {
          this.exchanges.delete(exchange);
          if (!this.isDead) reject(error);
        },
      });
      this.exchanges.add(exchange);
      init.signal?.addEventListener('abort', () => {
        this.exchanges.delete(exchange);
        exchange.leave();
        reject(new DOMException('The operation was aborted.', 'AbortError'));
      });
    });
  }
}

const fillFrom = (random: () => number) => (bytes: Uint8Array) => {
  for (let i = 0; i < bytes.length; i += 1) bytes[i] = Math.floor(random() * 256);
  return bytes;
};
