import type { Deps } from '../deps';
import type { Demo } from './createDemo';

/** Everything needed to walk through the demo, on standard output. */
export function printDemo(demo: Demo, { publicUrl, config }: Deps): void {
  const lines = [
    '',
    `An invented school with ${demo.runs} runs. Open ${publicUrl}`,
    '',
    `Staff (${publicUrl}/sign-in), password for all: ${demo.password}`,
    ...demo.staff.map(({ role, email }) => `  ${role.padEnd(12)} ${email}`),
    '',
    'Classes',
    ...demo.classes.map(
      ({ name, code, board_pass }) => `  ${name.padEnd(18)} code ${code}   Board ${publicUrl}/board/${board_pass}`,
    ),
    '',
    `Students who can come back (${publicUrl}/return)`,
    ...demo.students.map(
      ({ code, bench, nickname, pin }) => `  code ${code}  bench ${bench}  ${nickname.padEnd(8)} PIN ${pin}`,
    ),
    '',
    `Mails are not sent but kept in ${config.dataDir}/mail`,
    '',
  ];
  process.stdout.write(`${lines.join('\n')}\n`);
}
