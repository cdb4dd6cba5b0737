import fc from 'fast-check';
import { ownerKey } from '@/db/localStore';
import type { SyncItem, Verdict } from '@shared/schemas/sync';
import { canonicalText, digestOf } from '@shared/schemas/canonical';
import { readAnswer, requestBytes } from './httpText';
import { Broken, serverRows, storesOf } from './invariants';
import { keyedRun, noteEdit, runOfAnotherKind } from './made';
import type { Fault } from './network';
import { seededRandom } from './seededRandom';
import { SERVER_POINTS, type ServerPoint } from './simServer';
import { TAB_POINTS, type TabPoint } from './tab';
import type { Tab } from './tab';
import type { PersonName } from './template';
import type { World } from './world';

/** What may happen in a schedule, one thing after another. A command that has nothing to act on does nothing. */
export type Command =
  | { do: 'key'; phone: number; tab: number; isOfAnotherKind: boolean }
  | { do: 'time'; phone: number; tab: number; taps: number; isFinished: boolean }
  | { do: 'edit'; phone: number; tab: number; which: number }
  | { do: 'pass'; ms: number }
  | { do: 'meet'; phone: number; fault: Fault }
  | { do: 'weather'; phone: number; kind: 'clear' | 'off' | 'rough'; seed: number }
  | { do: 'end_tab'; phone: number; tab: number; at: TabPoint | 'now'; nth: number }
  | { do: 'open_tab'; phone: number; tab: number }
  | { do: 'end_server'; at: ServerPoint | 'now'; nth: number; down_ms: number }
  | { do: 'back_up' }
  | { do: 'restore'; which: number }
  | { do: 'clock'; of: 'phone' | 'server'; phone: number; to_ms: number }
  | { do: 'sign_in'; phone: number; tab: number; who: PersonName; claim: boolean }
  | { do: 'sign_out'; phone: number; tab: number }
  | { do: 'send_now'; phone: number; tab: number }
  | { do: 'try_again'; phone: number; tab: number }
  | { do: 'steal'; who: 'cem' | 'dot' | 'noor'; what: 'other_bytes' | 'same_bytes' | 'edit'; which: number };

const SECOND = 1_000;
/** Between two commands a way through the network may end, or not. */
const MOST_BETWEEN_MS = 80;
const DAY = 86_400 * SECOND;
const phone = fc.constantFrom(0, 0, 1);
const tab = fc.constantFrom(0, 0, 0, 1);
const nth = fc.constantFrom(1, 1, 1, 2, 3, 4);
const part = fc.double({ min: 0.05, max: 0.95, noNaN: true });
const which = fc.nat({ max: 30 });
const way = fc.constantFrom(20, 400, 3 * SECOND, 16 * SECOND, 40 * SECOND);

const fault: fc.Arbitrary<Fault> = fc.oneof(
  fc.constant<Fault>({ kind: 'refused' }),
  fc.constant<Fault>({ kind: 'lost_request' }),
  fc.constant<Fault>({ kind: 'lost_answer' }),
  fc.record({ kind: fc.constant('cut_request' as const), part }),
  fc.record({ kind: fc.constant('cut_answer' as const), part }),
  fc.record({ kind: fc.constant('slow' as const), there_ms: way, back_ms: way }),
  fc.constant<Fault>({ kind: 'twin' }),
  fc.record({ kind: fc.constant('late_copy' as const), after_ms: fc.constantFrom(100, 5 * SECOND, 90 * SECOND) }),
  fc.record({ kind: fc.constant('portal' as const), how: fc.constantFrom('page', 'redirect', 'json') }),
  fc.record({
    kind: fc.constant('status' as const),
    status: fc.constantFrom(200, 204, 301, 400, 401, 403, 404, 409, 413, 422, 429, 500, 502, 503),
    body: fc.constantFrom('page', 'empty'),
  }),
  // In the words of our own server; 413 is left out, because it is said of a request that is too large alone.
  fc.record({
    kind: fc.constant('status' as const),
    status: fc.constantFrom(400, 401, 403, 404, 409, 422, 429, 500, 503),
    body: fc.constant('ours'),
  }),
);

const just = <T extends Command>(shape: { [K in keyof T]: fc.Arbitrary<T[K]> }) =>
  fc.record(shape, { noNullPrototype: true }) as fc.Arbitrary<T>;
type Do<Name extends Command['do']> = Extract<Command, { do: Name }>;
const named = <Name extends Command['do']>(name: Name) => fc.constant(name);

export const commands: fc.Arbitrary<Command[]> = fc.array(
  fc.oneof(
    {
      weight: 8,
      arbitrary: just<Do<'key'>>({
        do: named('key'),
        phone,
        tab,
        isOfAnotherKind: fc.constantFrom(false, false, false, true),
      }),
    },
    {
      weight: 6,
      arbitrary: just<Do<'time'>>({
        do: named('time'),
        phone,
        tab,
        taps: fc.integer({ min: 0, max: 4 }),
        isFinished: fc.boolean(),
      }),
    },
    { weight: 4, arbitrary: just<Do<'edit'>>({ do: named('edit'), phone, tab, which }) },
    {
      weight: 12,
      arbitrary: just<Do<'pass'>>({
        do: named('pass'),
        ms: fc.constantFrom(10, 45, 700, 3 * SECOND, 20 * SECOND, 65 * SECOND),
      }),
    },
    { weight: 8, arbitrary: just<Do<'meet'>>({ do: named('meet'), phone, fault }) },
    {
      weight: 2,
      arbitrary: just<Do<'weather'>>({
        do: named('weather'),
        phone,
        kind: fc.constantFrom('clear', 'off', 'rough'),
        seed: fc.nat({ max: 1e6 }),
      }),
    },
    {
      weight: 6,
      arbitrary: just<Do<'end_tab'>>({
        do: named('end_tab'),
        phone,
        tab,
        at: fc.constantFrom('now', ...(Object.keys(TAB_POINTS) as TabPoint[])),
        nth,
      }),
    },
    { weight: 3, arbitrary: just<Do<'open_tab'>>({ do: named('open_tab'), phone, tab }) },
    {
      weight: 4,
      arbitrary: just<Do<'end_server'>>({
        do: named('end_server'),
        at: fc.constantFrom('now', 'before_commit', ...SERVER_POINTS),
        nth,
        down_ms: fc.constantFrom(50, 3 * SECOND, 30 * SECOND),
      }),
    },
    { weight: 1, arbitrary: just<Do<'back_up'>>({ do: named('back_up') }) },
    { weight: 1, arbitrary: just<Do<'restore'>>({ do: named('restore'), which }) },
    {
      weight: 1,
      arbitrary: just<Do<'clock'>>({
        do: named('clock'),
        of: fc.constantFrom('phone', 'server'),
        phone,
        to_ms: fc.constantFrom(-1e14, -DAY, -5 * SECOND, 40, DAY, 40 * DAY, 0),
      }),
    },
    {
      weight: 4,
      arbitrary: just<Do<'sign_in'>>({
        do: named('sign_in'),
        phone,
        tab,
        who: fc.constantFrom('ana', 'ana', 'ben', 'ben', 'cem', 'mira'),
        claim: fc.boolean(),
      }),
    },
    { weight: 2, arbitrary: just<Do<'sign_out'>>({ do: named('sign_out'), phone, tab }) },
    { weight: 4, arbitrary: just<Do<'send_now'>>({ do: named('send_now'), phone, tab }) },
    { weight: 1, arbitrary: just<Do<'try_again'>>({ do: named('try_again'), phone, tab }) },
    {
      weight: 1,
      arbitrary: just<Do<'steal'>>({
        do: named('steal'),
        who: fc.constantFrom('cem', 'dot', 'noor'),
        what: fc.constantFrom('other_bytes', 'same_bytes', 'edit'),
        which,
      }),
    },
  ),
  { minLength: 1, maxLength: 30, size: 'max' },
);

export async function carryOut(world: World, command: Command): Promise<void> {
  await steps[command.do](world, command as never);
  await world.pass(Math.floor(world.random() * MOST_BETWEEN_MS));
}

const steps: { [Name in Command['do']]: (world: World, command: Do<Name>) => void | Promise<void> } = {
  key(world, { phone, tab, isOfAnotherKind }) {
    const on = openTab(world, phone, tab);
    const { page } = on;
    const id = world.newId();
    const run = keyedRun(
      id,
      world.phones[phone]!.wall(),
      10 + Math.floor(world.random() * 20),
      `keyed ${id.slice(-4)}`,
    );
    const made = world.made.add({
      type: 'run',
      id,
      phone,
      owner: ownerOn(page),
      fate: isOfAnotherKind ? 'refusable' : 'good',
    });
    world.expectDone(
      on,
      page.key(isOfAnotherKind ? runOfAnotherKind(run) : run),
      'keying in a run',
      () => (made.isKept = true),
    );
  },

  async time(world, { phone, tab, taps, isFinished }) {
    const on = openTab(world, phone, tab);
    if (!world.runs.has(on)) {
      const id = world.newId();
      let isArmed = false;
      world.expectDone(
        on,
        on.page.arm(id).then((may) => (isArmed = may)),
        'arming',
      );
      await world.still();
      if (!isArmed) return;
      const owner = ownerOn(on.page);
      world.runs.set(on, world.made.add({ type: 'run', id, phone, owner, fate: 'good', taps: { at_us: [], kept: 0 } }));
    }
    const made = world.runs.get(on)!;
    for (let n = 0; n < taps && !on.isDead; n += 1) {
      await world.pass(2_007);
      if (on.isDead || !on.page.tap(on.now())) break;
      made.taps!.at_us.push(on.now() * 1_000);
      await world.still();
      if (!on.isDead && on.page.isKept()) made.taps!.kept = made.taps!.at_us.length;
    }
    if (!isFinished || on.isDead) return;
    const hasMarks = made.taps!.at_us.length > 0;
    world.expectDone(on, on.page.finish(), 'finishing', () => {
      world.runs.delete(on);
      if (hasMarks) made.isKept = true;
    });
  },

  edit(world, { phone, tab, which }) {
    const on = openTab(world, phone, tab);
    const owner = ownerOn(on.page);
    const runs = storesOf(world.phones[phone]!).find((store) => store.owner === owner)?.runs ?? [];
    const run = runs[which % runs.length];
    if (!run) return;
    const id = world.newId();
    const { fate } = world.made.get(run.id)!;
    const made = world.made.add({ type: 'edit', id, run_id: run.id, phone, owner, fate });
    const edit = noteEdit(id, run.id, world.phones[phone]!.wall(), `note ${id.slice(-4)}`);
    world.expectDone(on, on.page.edit(edit), 'noting an edit', () => (made.isKept = true));
  },

  pass: (world, { ms }) => world.pass(ms),
  meet: (world, { phone, fault }) => world.phones[phone]!.network.meet(fault),

  weather(world, { phone, kind, seed }) {
    const { network } = world.phones[phone]!;
    network.clear();
    network.isOff = kind === 'off';
    const random = seededRandom(seed);
    if (kind === 'rough') network.weather = () => roughFault(random);
  },

  end_tab(world, { phone, tab, at, nth }) {
    const on = world.phones[phone]!.tabs[tab];
    if (at === 'now') on?.kill();
    else on?.endAt(at, nth);
  },
  open_tab: (world, { phone, tab }) => void openTab(world, phone, tab),

  end_server(world, { at, nth, down_ms }) {
    world.restartsAfter(down_ms);
    if (at === 'now') world.server.kill();
    else world.server.endAt(at, nth);
  },
  back_up: (world) => (world.server.isUp ? world.server.backUp() : undefined),
  async restore(world, { which }) {
    if (world.server.backupCount === 0 || !world.server.isUp) return;
    await world.server.restore(which);
  },

  clock(world, { of, phone, to_ms }) {
    if (of === 'server') world.serverSkew_ms = Math.max(to_ms, -DAY);
    else world.phones[phone]!.skew_ms = to_ms;
  },

  sign_in(world, { phone, tab, who, claim }) {
    const on = openTab(world, phone, tab);
    if (world.runs.has(on)) return;
    void world.signIn(on, who, claim).catch(() => undefined);
  },
  sign_out(world, { phone, tab }) {
    const on = openTab(world, phone, tab);
    if (!world.runs.has(on)) world.expectDone(on, on.page.session.signOut(), 'signing out');
  },
  send_now: (world, { phone, tab }) => openTab(world, phone, tab).page.sync.sendNow(),
  try_again(world, { phone, tab }) {
    const on = openTab(world, phone, tab);
    const store = storesOf(world.phones[phone]!).find(({ owner }) => owner === ownerOn(on.page));
    const refused = store?.runs.find(({ state }) => state === 'refused');
    if (refused) world.expectDone(on, on.page.sync.tryAgain('run', refused.id), 'trying a refused run again');
  },

  async steal(world, { who, what, which }) {
    const held = await serverRows(world);
    const foreign = [...(held?.runs.values() ?? [])].filter(
      ({ id }) => !world.maySee(world.ownerOf(who), world.made.get(id)!),
    );
    const run = foreign[which % foreign.length];
    if (!run) return;
    const items: SyncItem[] =
      what === 'edit' ? [foreignEdit(world, run.id)] : [foreignRun(world, run, what === 'same_bytes')];
    const verdicts = await handInAs(world, who, items);
    const bad = verdicts.find(({ verdict }) => verdict !== 'refused');
    if (bad) throw new Broken(`${who} sent a foreign ${what} of ${run.id}, and the server said ${bad.verdict}`);
  },
};

const openTab = (world: World, phone: number, place: number): Tab => world.phones[phone]!.tab(place);
/** Whose store the page records into; null while it is still finding out. */
const ownerOn = ({ session }: Tab['page']): string | null => (session.store ? ownerKey(session.me) : null);

/** One exchange in two goes well. */
function roughFault(random: () => number): Fault | null {
  const kinds: Fault[] = [
    { kind: 'refused' },
    { kind: 'lost_answer' },
    { kind: 'cut_request', part: 0.2 + 0.7 * random() },
    { kind: 'cut_answer', part: random() },
    { kind: 'slow', there_ms: Math.floor(4_000 * random()), back_ms: Math.floor(4_000 * random()) },
    { kind: 'twin' },
    { kind: 'status', status: 502, body: 'page' },
  ];
  return kinds[Math.floor(random() * 2 * kinds.length)] ?? null;
}

function foreignRun(world: World, { id, raw }: { id: string; raw: string }, isSame: boolean): SyncItem {
  const text = isSame ? raw : canonicalText(keyedRun(id, world.wall(), 7, 'mine now'));
  return { type: 'run', id, digest: digestOf(text), raw: text, class_id: null, bench: null };
}

function foreignEdit(world: World, run_id: string): SyncItem {
  const raw = canonicalText({ ...noteEdit(world.newId(), run_id, world.wall(), 'not yours'), made_seq: 1 });
  return { type: 'edit', id: (JSON.parse(raw) as { id: string }).id, run_id, digest: digestOf(raw), raw };
}

/** Somebody with no phone of ours: signs in and hands in, over a network without faults. Returns no verdicts if the server ended. */
async function handInAs(world: World, who: PersonName, items: SyncItem[]): Promise<Verdict[]> {
  const { way } = world.school.people[who];
  const [path, form] =
    way.kind === 'staff'
      ? ['/api/sign-in', { email: way.email, password: way.password }]
      : ['/api/return', { code: way.code, bench: way.bench, nickname: way.nickname, pin: way.pin }];
  const signedIn = await post(world, path, form, '');
  const cookie = signedIn?.headers.getSetCookie()[0]?.split(';')[0] ?? '';
  const device_id = '018f0000-0000-4000-8000-00000000d00d';
  const answer = await post(world, '/api/sync', { protocol: 1, device_id, sent_wall_ms: world.wall(), items }, cookie);
  return answer?.status === 200 ? (JSON.parse(answer.text) as { verdicts: Verdict[] }).verdicts : [];
}

async function post(world: World, path: string, content: unknown, cookie: string) {
  const headers = { 'Content-Type': 'application/json', 'X-Swaymark': '1', ...(cookie ? { Cookie: cookie } : {}) };
  const delivered = world.server.deliver(
    requestBytes({ method: 'POST', path, headers, body: JSON.stringify(content) }),
  );
  await world.still();
  const bytes = await delivered;
  return bytes ? readAnswer(bytes) : null;
}

/** A command in one line, for people who read a counterexample. */
export const inWords = (command: Command): string => JSON.stringify(command);
