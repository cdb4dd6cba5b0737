import { v7 as uuidv7 } from 'uuid';
import type { StaffRole } from '@shared/schemas/accounts';
import { canonicalText, digestOf } from '@shared/schemas/canonical';
import { EDIT_FORMAT, EDIT_VERSION, type EditChange, type RawEdit } from '@shared/schemas/edit';
import type { RawRun } from '@shared/schemas/run';
import type { SyncRequest } from '@shared/schemas/sync';
import type { Deps } from '../deps';
import type { SchoolClass } from '../models/SchoolClass';
import type { SignedIn, StaffActor, StudentActor } from '../policies/actor';
import { createClass } from '../services/classes';
import { handIn } from '../services/intake/handIn';
import { joinClass } from '../services/joinClass';
import { acceptInvite, createSetUpLink, setUpFirstCoordinator } from '../services/staffAccounts';
import { createToken } from '../services/staffTokens';
import { bar, gateRun, keyedSplits, keyedTotal, tappedRun, type Scene } from './demoRuns';
import { createRandom } from './random';

export interface Demo {
  password: string;
  staff: { role: StaffRole; email: string }[];
  classes: { name: string; code: string; board_pass: string }[];
  students: { class: string; code: string; bench: number; nickname: string; pin: string }[];
  runs: number;
}

/** For everybody of the demo's staff. It opens an invented school on this machine and nothing else. */
const PASSWORD = 'two metres of thread';
const MINUTE_MS = 60_000;

/**
 * An invented scenario in an empty database, made through the same services that people use: two
 * classes, a stand, staff, students, and runs of every kind with faults planted in some of them.
 */
export async function createDemo(deps: Deps): Promise<Demo> {
  const staff = await createStaff(deps);
  const blue = (await createClass(deps, staff.teacher, { name: 'Physics 10 blue', teacher_word: 'copper' }))
    .schoolClass;
  const north = (await createClass(deps, staff.teacher, { name: 'Physics 11 north', teacher_word: 'walnut' }))
    .schoolClass;
  const benches = await createBenches(deps, blue, north);
  const random = createRandom(20_260_314);
  let minutesAgo = 90;
  const sceneOf = (device_id: string): Scene => ({
    random,
    wall_ms: deps.now() - (minutesAgo -= 3) * MINUTE_MS,
    device_id,
    app_version: deps.version,
  });
  let runs = 0;
  const give = async (actor: SignedIn, make: (scene: Scene) => RawRun) => {
    const device_id = uuidv7();
    const run = make(sceneOf(device_id));
    await handInOne(deps, actor, device_id, run);
    runs += 1;
    return run;
  };

  const [otter, newt, heron, wren, lynx, finch, marten, stoat] = benches.map(({ actor }) => actor) as StudentActor[];
  await give(otter!, (scene) => tappedRun(scene, { length_m: 0.5, amplitude_deg: 10, swings: 20 }));
  const doubled = await give(newt!, (scene) =>
    tappedRun(scene, { length_m: 0.75, amplitude_deg: 10, swings: 20, fault: 'double' }),
  );
  await give(heron!, (scene) => tappedRun(scene, { length_m: 0.5, amplitude_deg: 12, swings: 20, fault: 'missed' }));
  await give(heron!, (scene) =>
    tappedRun(scene, { length_m: 0.3, amplitude_deg: 15, swings: 20, swings_per_mark: 0.5 }),
  );
  await give(wren!, (scene) =>
    tappedRun(scene, { length_m: 0.6, amplitude_deg: 10, swings: 10, fault: 'half_swings' }),
  );
  await give(wren!, (scene) => tappedRun(scene, { length_m: 1, amplitude_deg: 8, swings: 50, swings_per_mark: 5 }));
  await give(lynx!, (scene) => keyedTotal(scene, { length_m: 0.8, amplitude_deg: 10, swings: 20 }, 'one'));
  await give(lynx!, (scene) => tappedRun(scene, { length_m: 1, amplitude_deg: 10, swings: 20, fault: 'cut_short' }));
  await give(finch!, (scene) => keyedSplits(scene, { length_m: 0.64, amplitude_deg: 10, swings: 10 }));
  await give(finch!, (scene) =>
    gateRun(scene, { length_m: 0.45, amplitude_deg: 20, swings: 30 }, { width_m: 0.02, distance_m: 0.45 }),
  );
  await give(marten!, (scene) =>
    tappedRun(scene, { ...bar(1, 0.45), amplitude_deg: 60, swings: 20, keptPerSwing: 0.985 }),
  );
  await give(marten!, (scene) => keyedTotal(scene, { length_m: 0.4, amplitude_deg: 10, swings: 25 }, 'not_sure'));
  await give(stoat!, (scene) => tappedRun(scene, { length_m: 0.9, amplitude_deg: 20, swings: 30 }));
  for (const amplitude_deg of [8, 11, 9]) {
    await give(staff.volunteer, (scene) => tappedRun(scene, { length_m: 0.25, amplitude_deg, swings: 10 }));
  }
  await lookAtDouble(deps, staff.teacher, doubled);
  await deps.analyses.settled();
  return {
    password: PASSWORD,
    staff: Object.values(staff).map(({ kind, account }) => ({ role: kind, email: account.email })),
    classes: [blue, north].map(({ name, code, board_pass }) => ({ name, code, board_pass })),
    students: benches.map(({ actor, pin }) => ({
      class: actor.schoolClass.name,
      code: actor.schoolClass.code,
      bench: actor.student.bench,
      nickname: actor.student.nickname,
      pin,
    })),
    runs,
  };
}

async function createStaff(deps: Deps): Promise<Record<StaffRole, StaffActor>> {
  const token = (await createSetUpLink(deps)).split('/').at(-1)!;
  const coordinator = await setUpFirstCoordinator(deps, {
    token,
    name: 'Robin Teasel',
    email: 'coordinator@example.org',
    password: PASSWORD,
  });
  const asActor = (account: StaffActor['account']): StaffActor => ({
    kind: account.role,
    id: account.id,
    signInId: '',
    account,
  });
  const invited = async (role: StaffRole, name: string) => {
    const email = `${role}@example.org`;
    const made = await deps.database.writeTransaction((transaction) =>
      createToken(deps, { purpose: 'invite', email, role }, transaction),
    );
    return asActor(await acceptInvite(deps, { token: made.token, name, password: PASSWORD }));
  };
  return {
    coordinator: asActor(coordinator),
    teacher: await invited('teacher', 'Mira Bracken'),
    volunteer: await invited('volunteer', 'Jo Sorrel'),
  };
}

async function createBenches(deps: Deps, blue: SchoolClass, north: SchoolClass) {
  const places: [SchoolClass, number, string][] = [
    [blue, 1, 'Otter'],
    [blue, 1, 'Newt'],
    [blue, 2, 'Heron'],
    [blue, 3, 'Wren'],
    [blue, 4, 'Lynx'],
    [north, 1, 'Finch'],
    [north, 2, 'Marten'],
    [north, 3, 'Stoat'],
  ];
  const benches: { actor: StudentActor; pin: string }[] = [];
  for (const [schoolClass, bench, nickname] of places) {
    const { student, pin } = await joinClass(deps, {
      join_id: uuidv7(),
      code: schoolClass.code,
      bench,
      nickname,
    });
    benches.push({ actor: { kind: 'student', id: student.id, signInId: '', student, schoolClass }, pin });
  }
  return benches;
}

async function handInOne(deps: Deps, actor: SignedIn, device_id: string, run: RawRun): Promise<void> {
  const raw = canonicalText(run);
  await send(deps, actor, device_id, {
    type: 'run',
    id: run.id,
    digest: digestOf(raw),
    raw,
    class_id: null,
    bench: null,
  });
}

/** The teacher has looked at one of the faults already; the others wait for whoever tries the demo. */
async function lookAtDouble(deps: Deps, teacher: StaffActor, run: RawRun): Promise<void> {
  const change: EditChange = { kind: 'note', text: 'Two marks close together in the middle: look before you go on.' };
  const edit: RawEdit = {
    format: EDIT_FORMAT,
    version: EDIT_VERSION,
    id: uuidv7(),
    run_id: run.id,
    made_seq: 1,
    made_wall_ms: deps.now(),
    reason: 'seen while walking round',
    change,
  };
  const raw = canonicalText(edit);
  await send(deps, teacher, uuidv7(), { type: 'edit', id: edit.id, run_id: run.id, digest: digestOf(raw), raw });
}

async function send(deps: Deps, actor: SignedIn, device_id: string, item: SyncRequest['items'][number]): Promise<void> {
  const answer = await handIn(deps, actor, { protocol: 1, device_id, sent_wall_ms: deps.now(), items: [item] });
  const [verdict] = answer.verdicts;
  if (verdict?.verdict !== 'stored') throw new Error(`createDemo: ${JSON.stringify(verdict)}`);
}
