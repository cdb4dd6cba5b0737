import { Network } from './network';
import { PhoneDisk } from './phoneDisk';
import { PhoneLocks } from './phoneLocks';
import { Tab } from './tab';
import type { World } from './world';

/** One phone: its storage, its clock, its way to the server, and the tabs that are open on it. */
export class Phone {
  readonly disk = new PhoneDisk();
  readonly locks = new PhoneLocks();
  readonly network: Network;
  readonly tabs: (Tab | null)[] = [null, null];
  readonly localStorage: Pick<Storage, 'getItem' | 'setItem'>;
  /** How far its clock is from the world's, ms. */
  skew_ms = 0;

  constructor(
    readonly world: World,
    readonly index: number,
  ) {
    const note = (what: string) => world.note(`phone ${index} ${what}`);
    this.network = new Network(world.time, world.server, (bytes) => world.noteAnswer(bytes), note);
    const kept = new Map<string, string>();
    this.localStorage = { getItem: (key) => kept.get(key) ?? null, setItem: (key, text) => void kept.set(key, text) };
  }

  /** Tells its databases from those of every other phone, of other schedules too. */
  get name(): string {
    return `${this.world.name}.${this.index}`;
  }

  wall(): number {
    return Math.max(0, this.world.wall() + this.skew_ms);
  }

  /** The tab in that place, opened if need be. */
  tab(place: number): Tab {
    return (this.tabs[place] ??= new Tab(this, this.world.code));
  }

  forget(tab: Tab): void {
    const place = this.tabs.indexOf(tab);
    if (place >= 0) this.tabs[place] = null;
  }

  closeTabs(): void {
    for (const tab of [...this.tabs]) tab?.kill();
  }
}
