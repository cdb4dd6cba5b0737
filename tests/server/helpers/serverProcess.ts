import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';

export interface ServerProcess {
  url: string;
  setUpToken: string | undefined;
  /** Everything written so far, to standard output and error. */
  output(): string;
  /** Sends the signal and waits for the end: exit code (null when killed) and how long it took. */
  end(signal: NodeJS.Signals): Promise<{ code: number | null; ms: number }>;
}

/** The server in a process of its own, as `npm start` runs it, from the sources. */
export async function startProcess(
  environment: Record<string, string>,
  entry = 'server/index.ts',
): Promise<ServerProcess> {
  const child = spawn(process.execPath, ['--import', 'tsx', entry], {
    env: { PATH: process.env.PATH, HOST: '127.0.0.1', PORT: '0', ...environment },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  let written = '';
  for (const stream of [child.stdout, child.stderr]) stream.on('data', (part: Buffer) => (written += part.toString()));
  await untilListening(child, () => written);
  return {
    url: /listens on (http:\/\/[\d.:]+)|Open (http:\/\/localhost:\d+)/.exec(written)!.slice(1).find(Boolean)!,
    setUpToken: /\/set-up\/([\w-]+)/.exec(written)?.[1],
    output: () => written,
    async end(signal) {
      const start = performance.now();
      child.kill(signal);
      const [code] = (await once(child, 'exit')) as [number | null];
      return { code, ms: performance.now() - start };
    },
  };
}

/** Runs a process that is expected to end by itself. */
export async function runProcess(environment: Record<string, string>, entry: string, words: string[] = []) {
  const child = spawn(process.execPath, ['--import', 'tsx', entry, ...words], {
    env: { PATH: process.env.PATH, HOST: '127.0.0.1', PORT: '0', ...environment },
  });
  let written = '';
  for (const stream of [child.stdout, child.stderr]) stream.on('data', (part: Buffer) => (written += part.toString()));
  const [code] = (await once(child, 'close')) as [number | null];
  return { code, output: written };
}

/** Ready once it says where it listens; what belongs to that is written in the same breath. */
async function untilListening(child: ChildProcess, output: () => string): Promise<void> {
  while (!/listens on .*\n|Mails are not sent.*\n/.test(output())) {
    if (child.exitCode !== null) throw new Error(`the server ended with ${child.exitCode}:\n${output()}`);
    await new Promise((resolve) => setTimeout(resolve, 20));
  }
}
