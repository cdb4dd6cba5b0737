import { carryOut, inWords, type Command } from './commands';
import type { TabCode } from './tabCode';
import type { School } from './template';
import { World } from './world';

/**
 * One schedule in a world of its own, from its first command to the end of healing.
 *
 * @returns what happened, in order
 * @throws  what was broken, and when
 */
export async function runSchedule(code: TabCode, school: School, seed: number, commands: Command[]): Promise<string[]> {
  const world = new World(code, school, seed);
  let at = 'at the start';
  try {
    await world.startServer();
    const tab = world.phones[0]!.tab(0);
    await world.pass(100);
    world.expectDone(tab, world.signIn(tab, 'ana', true), 'the first signing in');
    await world.pass(500);
    for (const [i, command] of commands.entries()) {
      at = `after command ${i + 1}, ${inWords(command)}`;
      await carryOut(world, command);
      await world.check();
    }
    at = 'after healing';
    await world.heal();
    return world.course;
  } catch (cause) {
    throw new Error(`${at}: ${cause instanceof Error ? cause.message : String(cause)}`, { cause });
  } finally {
    await world.dispose();
  }
}
