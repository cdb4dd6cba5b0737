import type { Server } from 'node:http';
import { Duplex } from 'node:stream';

/** One connection to a Node HTTP server that is made of bytes in memory: the server parses and writes real HTTP. */
class ByteConnection extends Duplex {
  readonly remoteAddress = '127.0.0.1';
  private readonly written: Buffer[] = [];

  constructor(
    private readonly onBytes: () => void,
    private readonly onEnd: () => void,
  ) {
    super();
  }

  override _read(): void {}

  override _write(chunk: Buffer, _encoding: string, done: () => void): void {
    this.written.push(Buffer.from(chunk));
    this.onBytes();
    done();
  }

  override _final(done: () => void): void {
    done();
    this.onEnd();
  }

  override _destroy(_error: Error | null, done: (error: null) => void): void {
    done(null);
    this.onEnd();
  }

  bytes(): Buffer {
    return Buffer.concat(this.written);
  }
}

export interface Conversation {
  /** All the server wrote, once it is done or cut off. */
  answer: Promise<Buffer>;
  /** The server's process is gone. */
  cut(): void;
}

/**
 * Sends `request` to the server. With `isCutShort` the connection breaks where the bytes end.
 *
 * @param mayWrite  asked at each write of the server; false ends the conversation without these bytes
 */
export function converse(server: Server, request: Buffer, isCutShort: boolean, mayWrite: () => boolean): Conversation {
  let tell: (bytes: Buffer) => void;
  const answer = new Promise<Buffer>((resolve) => (tell = resolve));
  let heard = 0;
  const connection = new ByteConnection(
    () => {
      if (mayWrite()) heard = connection.bytes().length;
    },
    () => tell(connection.bytes().subarray(0, heard)),
  );
  connection.on('error', () => undefined);
  server.emit('connection', connection);
  connection.push(request);
  if (isCutShort) setImmediate(() => connection.destroy());
  return { answer, cut: () => connection.destroy() };
}
