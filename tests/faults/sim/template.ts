import { cpSync, mkdtempSync, readdirSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { ClassView, Me } from '@shared/schemas/accounts';
import { createClass, joinStudent, PASSWORD, signInCoordinator, signInStaff } from '../../server/helpers/people';
import { startServer } from '../../support/startServer';

/** Somebody who can sign in. */
export interface Person {
  me: Me;
  way:
    | { kind: 'staff'; email: string; password: string }
    | { kind: 'student'; code: string; bench: number; nickname: string; pin: string };
}

export interface School {
  /** A data folder with all of them in it, to be copied. */
  dataDir: string;
  /** ana and ben share a bench, cem is at another, dot is in the other teacher's class. */
  people: Record<'ana' | 'ben' | 'cem' | 'dot' | 'mira' | 'noor', Person>;
}
export type PersonName = keyof School['people'];

/** A small school, made once by the real routes. */
export async function makeSchool(): Promise<School> {
  const server = await startServer();
  const coordinator = await signInCoordinator(server);
  const staff = async (email: string) => {
    const client = await signInStaff(server, coordinator, 'teacher', email);
    return { client, person: { me: client.me, way: { kind: 'staff', email, password: PASSWORD } } satisfies Person };
  };
  const mira = await staff('mira@example.org');
  const noor = await staff('noor@example.org');
  const miras = await createClass(mira.client);
  const noors = await createClass(noor.client, 'Physics 11 north');
  const student = async ({ code }: ClassView, bench: number, nickname: string): Promise<Person> => {
    const { me, pin } = await joinStudent(server, code, bench, nickname);
    return { me, way: { kind: 'student', code, bench, nickname, pin } };
  };
  const people = {
    ana: await student(miras, 1, 'Ana'),
    ben: await student(miras, 1, 'Ben'),
    cem: await student(miras, 2, 'Cem'),
    dot: await student(noors, 1, 'Dot'),
    mira: mira.person,
    noor: noor.person,
  };
  await server.running.stop();
  const dataDir = mkdtempSync(join(tmpdir(), 'swaymark-school-'));
  for (const file of readdirSync(server.dataDir))
    if (/^(swaymark|sessions)\.sqlite3(-wal)?$|^session-secret$/.test(file))
      cpSync(join(server.dataDir, file), join(dataDir, file));
  await server.stop();
  return { dataDir, people };
}
