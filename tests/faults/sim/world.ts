import { existsSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { v7 as uuidv7 } from 'uuid';
import { ownerKey } from '@/db/localStore';
import {
  Broken,
  checkAlways,
  checkDrainedAlone,
  checkHealed,
  storesOf,
  type Given,
  type StoreRows,
} from './invariants';
import { readAnswer } from './httpText';
import { MadeThings, type Made } from './made';
import { Phone } from './phone';
import { quiet } from './quiet';
import { seededRandom } from './seededRandom';
import { SimServer } from './simServer';
import type { Tab } from './tab';
import type { TabCode } from './tabCode';
import type { PersonName, School } from './template';
import { createVirtualTime } from './virtualTime';

const START_WALL_MS = Date.UTC(2026, 2, 2, 8);
const RESTART_MS = 3_000;
/** After that nothing of a bad time is still under way: the longest way, and the longest pause of an uploader. */
const LONGEST_WAY_MS = 95_000;
/** Enough for a few rounds on a good network. */
const VISIT_MS = 3_000;
const MOST_TURNS = 4;
/** The server comes back by itself within that. */
const LONGEST_DOWN_MS = 31_000;
let worlds = 0;

/** One schedule's world: a server, two phones, and what was made in it. */
export class World {
  readonly name = `w${process.pid}-${(worlds += 1)}`;
  readonly time = createVirtualTime();
  readonly random: () => number;
  readonly server: SimServer;
  readonly phones: Phone[];
  readonly made = new MadeThings();
  /** Receipts the server gave, by its epoch and the item's id. */
  readonly given = new Map<string, Map<string, Given>>();
  /** Runs that are being timed, by their tab. */
  readonly runs = new Map<Tab, Made>();
  serverSkew_ms = 0;
  private restart_ms = RESTART_MS;
  private readonly starting = new Set<Promise<void>>();
  private readonly healed = new Set<string>();
  /** What happened, in order, as far as a seed decides it. */
  readonly course: string[] = [];
  private trouble: unknown;

  constructor(
    readonly code: TabCode,
    readonly school: School,
    seed: number,
  ) {
    this.random = seededRandom(seed);
    const clock = () => this.wall() + this.serverSkew_ms;
    this.server = new SimServer(join(folderForDatabases(), `swaymark-${this.name}`), school.dataDir, clock, () =>
      this.startLater(),
    );
    this.phones = [new Phone(this, 0), new Phone(this, 1)];
  }

  wall(): number {
    return START_WALL_MS + Math.floor(this.time.now());
  }

  note(what: string): void {
    this.course.push(`${this.time.now()} ${what}`);
  }

  newId(): string {
    return uuidv7({
      msecs: this.wall(),
      rng: () => Uint8Array.from({ length: 16 }, () => Math.floor(this.random() * 256)),
    });
  }

  /** The server comes back that long after its next end. */
  restartsAfter(ms: number): void {
    this.restart_ms = ms;
  }

  private startLater(): void {
    this.note('the server ends');
    this.time.after(this.restart_ms, () => this.startNow());
    this.restart_ms = RESTART_MS;
  }

  private startNow(): void {
    const start = this.server.start().finally(() => this.starting.delete(start));
    this.starting.add(start);
    start.catch((error: unknown) => (this.trouble ??= error));
  }

  async startServer(): Promise<void> {
    this.startNow();
    await this.still();
  }

  /** Comes back when all that was set going is done, but for what needs time to pass. */
  async still(): Promise<void> {
    do {
      await Promise.all(this.starting);
      await this.server.quiet();
    } while (this.starting.size > 0);
    if (this.trouble) throw this.trouble;
  }

  pass(ms: number): Promise<void> {
    return this.time.pass(ms, () => this.still());
  }

  /** Something a page does that must not fail, unless the page ends first. */
  expectDone(tab: Tab, work: Promise<unknown>, what: string, done: () => void = () => undefined): void {
    work.then(
      () => tab.isDead || done(),
      (error: unknown) => {
        if (!tab.isDead) this.trouble ??= new Broken(`${what} failed: ${String(error)}`);
      },
    );
  }

  /** Reads a hand-in's answer as it leaves the server. */
  noteAnswer(bytes: Buffer): void {
    const answer = readAnswer(bytes);
    if (!answer?.isWhole || !answer.text.startsWith('{"server_epoch"')) return;
    const { server_epoch, verdicts } = JSON.parse(answer.text) as { server_epoch: string; verdicts?: Given[] };
    const given = this.given.get(server_epoch) ?? new Map<string, Given>();
    this.given.set(server_epoch, given);
    for (const verdict of verdicts ?? []) {
      if (!('receipt' in verdict)) continue;
      const before = given.get(verdict.id);
      if (before && before.receipt.code !== verdict.receipt.code)
        this.trouble ??= new Broken(`${verdict.id} got receipts ${before.receipt.code} and ${verdict.receipt.code}`);
      given.set(verdict.id, verdict);
    }
  }

  ownerOf(name: PersonName): string {
    return ownerKey(this.school.people[name].me);
  }

  personOf(owner: string): PersonName | undefined {
    return (Object.keys(this.school.people) as PersonName[]).find((name) => this.ownerOf(name) === owner);
  }

  /** Students see what is made at their bench, teachers what is made in their classes. An edit is seen with its run. */
  maySee(owner: string, made: Made): boolean {
    if (made.type === 'edit') {
      const run = this.made.get(made.run_id!);
      return run !== undefined && this.maySee(owner, run);
    }
    const reader = this.personOf(owner);
    const maker = made.owner === null ? undefined : this.personOf(made.owner);
    return reader !== undefined && maker !== undefined && (reader === maker || SEES[reader].includes(maker));
  }

  async signIn(tab: Tab, name: PersonName, claim: boolean): Promise<void> {
    const { session } = tab.page;
    const { way } = this.school.people[name];
    await session.ready;
    if (way.kind === 'staff') await session.signIn({ email: way.email, password: way.password }, claim);
    else await session.comeBack({ code: way.code, bench: way.bench, nickname: way.nickname, pin: way.pin }, claim);
  }

  check = (): Promise<void> => checkAlways(this);

  wasHealed = ({ phone, owner }: StoreRows): boolean => this.healed.has(`${phone} ${owner}`);

  /**
   * All faults end and the server is up. Then whoever has something on a phone comes back to it, and again
   * if need be: an edit may wait for a run that another phone has to send first.
   */
  async heal(): Promise<void> {
    this.server.disarm();
    for (const phone of this.phones) {
      phone.network.clear();
      for (const tab of phone.tabs) tab?.disarm();
    }
    // Looking at the feed for minutes costs most of a schedule's time, so it is not done in each.
    const isLeftAlone = this.random() < 0.3;
    if (!isLeftAlone) for (const phone of this.phones) phone.closeTabs();
    await this.pass(LONGEST_DOWN_MS);
    if (!this.server.isUp) await this.startServer();
    await this.pass(LONGEST_WAY_MS);
    if (isLeftAlone) await checkDrainedAlone(this);
    for (let turn = 1; ; turn += 1) {
      for (const phone of this.phones)
        for (const name of this.peopleOf(phone))
          await this.visit(phone, name, `${name} on phone ${phone.index}, turn ${turn}`);
      try {
        return await checkHealed(this);
      } catch (error) {
        if (turn === MOST_TURNS) throw error;
      }
    }
  }

  private peopleOf(phone: Phone): PersonName[] {
    const stores = storesOf(phone);
    const people = stores.map(({ owner }) => this.personOf(owner)).filter((name) => name !== undefined);
    const guest = stores.find(({ owner }) => owner === 'guest');
    const isGuestOnly = people.length === 0 && guest && guest.runs.length + guest.recordings.length > 0;
    return isGuestOnly ? ['ana'] : people;
  }

  private async visit(phone: Phone, name: PersonName, who: string): Promise<void> {
    phone.closeTabs();
    const tab = phone.tab(0);
    const { page } = tab;
    await this.pass(100);
    if (page.session.me && ownerKey(page.session.me) !== this.ownerOf(name)) {
      this.expectDone(tab, page.session.signOut(), `signing out for ${who}`);
      await this.pass(200);
    }
    this.expectDone(tab, this.signIn(tab, name, true), `signing in of ${who}`);
    await this.pass(300);
    this.expectDone(tab, page.keepCutShort(), `keeping what was cut short of ${who}`);
    await this.pass(VISIT_MS);
    this.healed.add(`${phone.index} ${this.ownerOf(name)}`);
  }

  async dispose(): Promise<void> {
    for (const phone of this.phones) phone.closeTabs();
    await quiet(() => false);
    await this.server.dispose();
  }
}

/** In memory where there is such a folder: a kill loses nothing that was written, so the disk behind does not matter. */
const folderForDatabases = () => (existsSync('/dev/shm') ? '/dev/shm' : tmpdir());

const SEES: Record<PersonName, PersonName[]> = {
  ana: ['ben'],
  ben: ['ana'],
  cem: [],
  dot: [],
  mira: ['ana', 'ben', 'cem'],
  noor: ['dot'],
};
