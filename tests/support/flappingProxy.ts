import { connect, createServer, type AddressInfo, type Socket } from 'node:net';

/**
 * What the proxy does with one exchange. drop: the connection breaks before anything is answered. delay: all
 * of it comes late. half_close: the server gets the request, and the browser's side is shut before the answer.
 * truncate: the answer breaks off in its body. portal: a sign-in page answers in the server's place.
 */
export const MOODS = ['drop', 'portal', 'truncate', 'delay', 'half_close', 'pass'] as const;
export type Mood = (typeof MOODS)[number];

export interface FlappingProxy {
  url: string;
  /** Which moods follow each other, round and round; null for a good network. */
  flap(moods: readonly Mood[] | null): void;
  /** How often each mood was met. */
  met: Record<Mood, number>;
  close(): Promise<void>;
}

const DELAY_MS = 700;
const PORTAL_PAGE = '<!doctype html><title>Sign in to Wi-Fi</title>';
const PORTAL =
  `HTTP/1.1 200 OK\r\nContent-Type: text/html\r\nContent-Length: ${PORTAL_PAGE.length}\r\nConnection: close\r\n\r\n` +
  PORTAL_PAGE;

/** A TCP proxy in front of `port` of 127.0.0.1, on a port of its own, that treats each exchange as told. */
export async function startFlappingProxy(port: number): Promise<FlappingProxy> {
  let moods: readonly Mood[] | null = null;
  let turn = 0;
  const met = Object.fromEntries(MOODS.map((mood) => [mood, 0])) as Record<Mood, number>;
  const open = new Set<Socket>();

  const server = createServer((browser) => {
    const upstream = connect(port, '127.0.0.1');
    let mood: Mood = 'pass';
    let isAnswering = true;
    const end = () => {
      browser.destroy();
      upstream.destroy();
    };
    for (const socket of [browser, upstream]) {
      open.add(socket);
      socket.on('error', end).on('close', () => {
        open.delete(socket);
        end();
      });
    }
    browser.on('data', (bytes) => {
      // The first bytes after an answer are a new exchange on the same connection.
      if (isAnswering) {
        isAnswering = false;
        mood = moods ? moods[turn++ % moods.length]! : 'pass';
        if (moods) met[mood] += 1;
      }
      if (mood === 'drop') end();
      else if (mood === 'portal') browser.end(PORTAL);
      else if (mood === 'delay') setTimeout(() => upstream.write(bytes), DELAY_MS);
      else upstream.write(bytes);
      if (mood === 'half_close') browser.end();
    });
    upstream.on('data', (bytes) => {
      isAnswering = true;
      if (mood === 'half_close') return end();
      if (mood !== 'truncate') return void browser.write(bytes);
      browser.write(bytes.subarray(0, bytes.length - 2), end);
    });
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  return {
    url: `http://localhost:${(server.address() as AddressInfo).port}`,
    flap(now) {
      moods = now;
      turn = 0;
    },
    met,
    async close() {
      for (const socket of open) socket.destroy();
      await new Promise((resolve) => server.close(resolve));
    },
  };
}
