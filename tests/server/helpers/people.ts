import { randomUUID } from 'node:crypto';
import type { ClassView, Me, StaffRole } from '@shared/schemas/accounts';
import type { TestServer } from '../../support/startServer';
import { createApiClient, type ApiClient, type Reply } from './apiClient';

export const PASSWORD = 'seven brass bobs';

export interface SignedInClient extends ApiClient {
  me: Me;
}
export interface StudentClient extends SignedInClient {
  pin: string;
  nickname: string;
  bench: number;
}

/** The first coordinator, by the set-up link. */
export async function signInCoordinator(server: TestServer, email = 'lead@example.org'): Promise<SignedInClient> {
  const client = createApiClient(server.url);
  const token = await server.setUpToken();
  const reply = await client.post('/api/set-up', { token, name: 'Lead', email, password: PASSWORD });
  return Object.assign(client, { me: must(reply).me as Me });
}

/** Staff invited by mail, as it is done in the product. */
export async function signInStaff(
  server: TestServer,
  coordinator: ApiClient,
  role: StaffRole,
  email: string,
): Promise<SignedInClient> {
  must(await coordinator.post('/api/invites', { email, role }));
  const client = createApiClient(server.url);
  const token = tokenIn((await server.mails()).at(-1)!, 'invite');
  const reply = await client.post('/api/invites/accept', { token, name: email.split('@')[0], password: PASSWORD });
  return Object.assign(client, { me: must(reply).me as Me });
}

export async function createClass(teacher: ApiClient, name = 'Physics 10 blue'): Promise<ClassView> {
  return must(await teacher.post('/api/classes', { name, teacher_word: 'copper' })).class as ClassView;
}

export async function joinStudent(
  server: Pick<TestServer, 'url'>,
  code: string,
  bench = 1,
  nickname = 'Otter',
): Promise<StudentClient> {
  const client = createApiClient(server.url);
  const { me, pin } = must(await client.post('/api/join', { join_id: randomUUID(), code, bench, nickname }));
  return Object.assign(client, { me: me as Me, pin: pin as string, nickname, bench });
}

/** One coordinator, two teachers with a class each, a volunteer, and a student in each class. */
export async function createSchool(server: TestServer) {
  const coordinator = await signInCoordinator(server);
  const teacher = await signInStaff(server, coordinator, 'teacher', 'mira@example.org');
  const otherTeacher = await signInStaff(server, coordinator, 'teacher', 'noor@example.org');
  const volunteer = await signInStaff(server, coordinator, 'volunteer', 'jo@example.org');
  const ownClass = await createClass(teacher);
  const otherClass = await createClass(otherTeacher, 'Physics 11 north');
  const student = await joinStudent(server, ownClass.code, 1, 'Otter');
  const otherStudent = await joinStudent(server, otherClass.code, 1, 'Finch');
  return { coordinator, teacher, otherTeacher, volunteer, ownClass, otherClass, student, otherStudent };
}
export type School = Awaited<ReturnType<typeof createSchool>>;

/** The token of the link of that kind in a mail. */
export function tokenIn(mail: string, kind: 'invite' | 'reset'): string {
  // Quoted-printable may break a long line with "=\r\n".
  const found = new RegExp(`/${kind}/([\\w-]+)`).exec(mail.replace(/=\r?\n/g, ''));
  if (!found) throw new Error(`no ${kind} link in this mail:\n${mail}`);
  return found[1]!;
}

/** The body of an answer that must be good. */
export function must(reply: Reply): Reply['body'] {
  if (reply.status !== 200) throw new Error(`${reply.status}: ${reply.text}`);
  return reply.body;
}
