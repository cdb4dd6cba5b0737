import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { ACTOR_KINDS, type ActorKind } from '../../server/policies/actor';
import { PERMISSIONS } from '../../server/policies/permissions';
import { routes } from '../../server/routes/index';
import type { Route } from '../../server/routes/route';
import { startServer, type TestServer } from '../support/startServer';
import { createApiClient, type ApiClient, type Reply, type SendOptions } from './helpers/apiClient';
import { createClass, createSchool, joinStudent, must, PASSWORD, signInStaff, type School } from './helpers/people';
import { batch, editItem, runItem } from './helpers/runs';

/**
 * Who may do what, written down a second time, from the roles and rights table of the trade notes and
 * not from server/policies. Every route is tried as every kind of actor.
 */
const STAFF_DOORS: ActorKind[] = ['nobody', 'student', 'volunteer', 'teacher', 'coordinator'];
const EVERYBODY: ActorKind[] = [...STAFF_DOORS, 'board'];
const MAY: Record<string, ActorKind[]> = {
  'post /api/classes/look-up': STAFF_DOORS,
  'post /api/join': STAFF_DOORS,
  'post /api/return': STAFF_DOORS,
  'get /api/me': STAFF_DOORS,
  'post /api/sign-in': STAFF_DOORS,
  'post /api/sign-out': STAFF_DOORS,
  'post /api/set-up': STAFF_DOORS,
  'post /api/invites/accept': STAFF_DOORS,
  'post /api/password/forgot': STAFF_DOORS,
  'post /api/password/reset': STAFF_DOORS,
  'get /api/people': ['coordinator'],
  'post /api/invites': ['coordinator'],
  'delete /api/invites/:id': ['coordinator'],
  'post /api/people/:id/disable': ['coordinator'],
  'post /api/people/:id/enable': ['coordinator'],
  'post /api/people/:id/reset-link': ['coordinator'],
  'get /api/classes': ['teacher', 'coordinator'],
  'post /api/classes': ['teacher', 'coordinator'],
  'get /api/classes/:id': ['teacher', 'coordinator'],
  'post /api/classes/:id/new-code': ['teacher', 'coordinator'],
  'post /api/classes/:id/new-board-pass': ['teacher', 'coordinator'],
  'post /api/students/:id/new-pin': ['teacher', 'coordinator'],
  'delete /api/students/:id': ['teacher', 'coordinator'],
  'post /api/sync': ['student', 'volunteer', 'teacher', 'coordinator'],
  'get /api/feed': ['student', 'volunteer', 'teacher', 'coordinator'],
  'get /api/board': ['board'],
  'get /api/health': EVERYBODY,
  'get /api/openapi.json': EVERYBODY,
};

const nameOf = (route: Route) => `${route.method} ${route.path}`;
let server: TestServer;
let school: School;
beforeAll(async () => {
  server = await startServer();
  school = await createSchool(server);
});
afterAll(() => server.stop());

test('every route has a row here, and every row a route', () => {
  expect(routes.map(nameOf).sort()).toEqual(Object.keys(MAY).sort());
});
test('every action of the table is used by one route', () => {
  expect(routes.map(({ action }) => action).sort()).toEqual(Object.keys(PERMISSIONS).sort());
});

describe.each(routes.map((route) => [nameOf(route), route] as const))('%s', (name, route) => {
  test.each(ACTOR_KINDS)('as %s', async (kind) => {
    const reply = await call(route, await clientFor(kind, route), await exampleOf(route));
    if (MAY[name]!.includes(kind)) {
      expect(reply.text).not.toMatch(/not_allowed|not_signed_in/);
      expect([200, 401, 410]).toContain(reply.status);
      if (reply.status !== 200) expect(['pin_not_matched', 'link_used_up']).toContain(reply.body.error.code);
    } else {
      const expected = kind === 'nobody' ? [401, 'not_signed_in'] : [403, 'not_allowed'];
      expect([reply.status, reply.body.error.code]).toEqual(expected);
    }
  });
});

describe('what belongs to others', () => {
  test.each(['', '/new-code', '/new-board-pass'])(
    'a teacher reaches /api/classes/:id%s of own classes alone',
    async (end) => {
      const ask = (id: string) =>
        end ? school.teacher.post(`/api/classes/${id}${end}`) : school.teacher.get(`/api/classes/${id}`);
      const [own, others, nowhere] = [
        await ask(school.ownClass.id),
        await ask(school.otherClass.id),
        await ask(randomUUID()),
      ];
      expect([own.status, others.status]).toEqual([200, 404]);
      expect(others.body).toEqual(nowhere.body);
    },
  );
  test('a teacher gives PINs to own students alone', async () => {
    const ask = (id: string) => school.teacher.post(`/api/students/${id}/new-pin`);
    const others = await ask(school.otherStudent.me.id);
    const nowhere = await ask(randomUUID());
    expect([others.status, others.body]).toEqual([404, nowhere.body]);
    const mate = await joinStudent(server, (await freshClass()).code, 7, 'Vole');
    expect((await ask(mate.me.id)).body.pin).toMatch(/^\d{6}$/);
  });
  test('a teacher takes out own students alone', async () => {
    const others = await school.teacher.delete(`/api/students/${school.otherStudent.me.id}`);
    const nowhere = await school.teacher.delete(`/api/students/${randomUUID()}`);
    expect([others.status, others.body]).toEqual([404, nowhere.body]);
  });
  test('a teacher lists own classes alone, a coordinator all of them without names', async () => {
    const own = await school.teacher.get('/api/classes');
    expect(own.text).not.toContain(school.otherClass.id);
    expect(own.text).toContain('Otter');
    const all = await school.coordinator.get('/api/classes');
    expect(all.text).toContain(school.otherClass.id);
    expect(all.text).not.toContain('Otter');
  });
  test('a coordinator who opens another’s class sees names, and that is written down', async () => {
    const seen = await school.coordinator.get(`/api/classes/${school.otherClass.id}`);
    expect(seen.text).toContain('Finch');
    const entry = await server.running.deps.database.models.ActivityEntry.findOne({
      where: { action: 'class.see_names', subject: school.otherClass.id },
    });
    expect(entry?.actor_id).toBe(school.coordinator.me.id);
  });
});

test.each([
  ['whoever timed it', 'student', 'stored'],
  ['the class’s teacher', 'teacher', 'stored'],
  ['another student', 'otherStudent', 'not_yours'],
  ['another teacher', 'otherTeacher', 'not_yours'],
  ['a volunteer', 'volunteer', 'not_yours'],
  ['a coordinator without this class', 'coordinator', 'not_yours'],
  ['another student of the bench', 'mate', 'not_your_run'],
] as const)('setting a run aside: %s gets %s', async (_who, key, expected) => {
  const item = runItem();
  must(await school.student.post('/api/sync', batch([item])));
  const mate = async () => {
    // The class may have been given a new code above.
    const { code } = must(await school.teacher.get(`/api/classes/${school.ownClass.id}`)).class;
    return joinStudent(server, code, 1, `M${(people += 1)}`);
  };
  const client = key === 'mate' ? await mate() : school[key];
  const aside = editItem(item.id, { kind: 'set_aside' }, 1, 'bob hit the stand');
  const [verdict] = must(await client.post('/api/sync', batch([aside]))).verdicts;
  expect(verdict.code ?? verdict.verdict).toBe(expected);
});

let people = 0;
const freshClass = () => createClass(school.teacher, `Class ${(people += 1)}`);

/** A client of that kind. Where the route ends or changes the sign-in it is one of its own. */
async function clientFor(kind: ActorKind, route: Route): Promise<{ client: ApiClient; options?: SendOptions }> {
  if (kind === 'nobody') return { client: createApiClient(server.url) };
  if (kind === 'board') {
    const { board_pass } = await freshClass();
    return { client: createApiClient(server.url), options: { headers: { 'X-Board-Pass': board_pass } } };
  }
  const changesSignIn = ['class.', 'staff.', 'me.sign_out'].some((start) => route.action.startsWith(start));
  if (!changesSignIn) return { client: school[kind] };
  if (kind === 'student') return { client: await joinStudent(server, (await freshClass()).code) };
  if (kind === 'coordinator') {
    const client = createApiClient(server.url);
    await client.post('/api/sign-in', { email: 'lead@example.org', password: PASSWORD });
    return { client };
  }
  if (kind === 'teacher') {
    const client = createApiClient(server.url);
    await client.post('/api/sign-in', { email: 'mira@example.org', password: PASSWORD });
    return { client };
  }
  return { client: await signInStaff(server, school.coordinator, kind, `p${(people += 1)}@example.org`) };
}

interface Example {
  params?: Record<string, string>;
  body?: unknown;
}

/** Good input for each route that needs some. */
async function exampleOf(route: Route): Promise<Example> {
  const token = 'x'.repeat(43);
  const newcomer = async () => ({ code: (await freshClass()).code, bench: 1, nickname: 'Newt' });
  const classId = async () => ({ params: { id: (await freshClass()).id } });
  const studentId = async () => ({ params: { id: (await joinStudent(server, (await freshClass()).code)).me.id } });
  const examples: Record<string, () => Promise<Example> | Example> = {
    'class.look_up': async () => ({ body: { code: (await freshClass()).code } }),
    'class.join': async () => ({ body: { join_id: randomUUID(), ...(await newcomer()) } }),
    'class.return': async () => ({ body: { ...(await newcomer()), pin: '123456' } }),
    'staff.sign_in': () => ({ body: { email: 'mira@example.org', password: PASSWORD } }),
    'staff.set_up': () => ({ body: { token, name: 'A', email: 'a@example.org', password: PASSWORD } }),
    'staff.accept_invite': () => ({ body: { token, name: 'A', password: PASSWORD } }),
    'staff.forgot': () => ({ body: { email: `f${(people += 1)}@example.org` } }),
    'staff.reset': () => ({ body: { token, password: PASSWORD } }),
    'people.invite': () => ({ body: { email: `i${(people += 1)}@example.org`, role: 'volunteer' } }),
    'people.withdraw_invite': async () => {
      const email = `w${(people += 1)}@example.org`;
      const { body } = await school.coordinator.post('/api/invites', { email, role: 'volunteer' });
      return { params: { id: body.invite.id } };
    },
    'people.disable': disposablePerson,
    'people.enable': disposablePerson,
    'people.reset_link': disposablePerson,
    'class.create': () => ({ body: { name: 'New', teacher_word: 'oak' } }),
    'class.see': classId,
    'class.new_code': classId,
    'class.new_board_pass': classId,
    'student.new_pin': studentId,
    'student.remove': studentId,
    'runs.hand_in': () => ({ body: batch([]) }),
  };
  return (await examples[route.action]?.()) ?? {};
}

async function disposablePerson(): Promise<Example> {
  const person = await signInStaff(server, school.coordinator, 'volunteer', `d${(people += 1)}@example.org`);
  return { params: { id: person.me.id } };
}

function call(
  route: Route,
  { client, options }: { client: ApiClient; options?: SendOptions },
  { params = {}, body }: Example,
): Promise<Reply> {
  const path = route.path.replace(/:(\w+)/g, (_, name: string) => params[name]!);
  if (route.method === 'get') return client.get(path, options);
  return route.method === 'delete' ? client.delete(path, options) : client.post(path, body, options);
}
