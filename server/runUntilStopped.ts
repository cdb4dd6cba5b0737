import { ConfigError } from './config';
import { keepFilesPrivate } from './keepFilesPrivate';
import type { RunningServer } from './start';

/** Starts a server for a process of its own: stops it on SIGTERM or SIGINT, and tells in words why it could not start. */
export async function runUntilStopped(start: () => Promise<RunningServer>): Promise<void> {
  keepFilesPrivate();
  let server: RunningServer;
  try {
    server = await start();
  } catch (error) {
    process.stderr.write(`${whatIsWrong(error)}\n`);
    process.exit(1);
  }
  const stop = () => {
    void server.stop().then(
      () => process.exit(0),
      (error: unknown) => {
        server.deps.log.fatal({ err: error }, 'the server did not stop cleanly');
        process.exit(1);
      },
    );
  };
  process.once('SIGTERM', stop);
  process.once('SIGINT', stop);
}

function whatIsWrong(error: unknown): string {
  const { code, port, message, stack } = error as NodeJS.ErrnoException & { port?: number };
  if (code === 'EADDRINUSE') return `Port ${port} is in use. Stop what uses it, or set PORT to another.`;
  if (error instanceof ConfigError) return message;
  return `${message}\n${stack ?? ''}`;
}
