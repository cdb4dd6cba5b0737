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
