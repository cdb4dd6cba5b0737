import './cheapHashes';
import { rmSync } from 'node:fs';
import { afterAll, beforeAll, it } from 'vitest';
import type { Command } from './sim/commands';
import { runSchedule } from './sim/runSchedule';
import { loadTabCode, type TabCode } from './sim/tabCode';
import { makeSchool, type School } from './sim/template';

/** Courses of events that once ended badly, each kept under its own name. */

let code: TabCode;
let school: School;
beforeAll(async () => {
  [code, school] = await Promise.all([loadTabCode(), makeSchool()]);
});
afterAll(() => rmSync(school.dataDir, { recursive: true, force: true }));

const on = { phone: 0, tab: 0 } as const;
const pass = (ms: number): Command => ({ do: 'pass', ms });

it('R8: runs timed as a guest go to one person, though the page ends in the middle of the move and another person claims next', async () => {
  await runSchedule(code, school, 1, [
    { do: 'sign_out', ...on },
    pass(700),
    { do: 'key', ...on, isOfAnotherKind: false },
    { do: 'end_tab', ...on, at: 'after_claim_or_epoch', nth: 1 },
    { do: 'sign_in', ...on, who: 'ana', claim: true },
    pass(3_000),
    { do: 'sign_out', ...on },
    pass(700),
    { do: 'sign_in', ...on, who: 'ben', claim: true },
    pass(3_000),
  ]);
});

it.each([0, 1])(
  'R8: of a sign-in whose answer broke off the cookie may be kept: nothing is sent under it (from tab %i)',
  async (tab) => {
    await runSchedule(code, school, 2, [
      { do: 'open_tab', phone: 0, tab: 1 },
      pass(3_000),
      { do: 'weather', phone: 0, kind: 'off', seed: 0 },
      { do: 'key', phone: 0, tab: 0, isOfAnotherKind: false },
      pass(300),
      { do: 'weather', phone: 0, kind: 'clear', seed: 0 },
      { do: 'meet', phone: 0, fault: { kind: 'cut_answer', part: 0.97 } },
      { do: 'sign_in', phone: 0, tab, who: 'ben', claim: false },
      pass(20_000),
    ]);
  },
);
