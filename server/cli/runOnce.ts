import { ConfigError } from '../config';
import { keepFilesPrivate } from '../keepFilesPrivate';

/** Runs a command to its end. A text it returns is what it needs from the caller, and exit code 2. */
export async function runOnce(command: (words: string[]) => Promise<string | undefined>): Promise<void> {
  keepFilesPrivate();
  try {
    const wanted = await command(process.argv.slice(2));
    if (wanted === undefined) return;
    process.stderr.write(`${wanted}\n`);
    process.exitCode = 2;
  } catch (error) {
    process.stderr.write(`${error instanceof ConfigError ? error.message : (error as Error).stack}\n`);
    process.exitCode = 1;
  }
}
