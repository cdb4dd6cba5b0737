import { mkdtempSync, rmSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createApiClient, type ApiClient } from '../../server/helpers/apiClient';
import { startServer, type TestServer } from '../../support/startServer';

export const COORDINATOR = { name: 'Ines Okoro', email: 'ines@example.org', password: 'plumb line over the basin' };

/** The built client served by the real server, on one port that stays the same when it is stopped and started. */
export interface Site {
  url: string;
  start: () => Promise<void>;
  stop: () => Promise<void>;
  /** The API as the coordinator calls it. */
  api: ApiClient;
  server: () => TestServer;
  dispose: () => Promise<void>;
}

async function freePort(): Promise<number> {
  const probe = createServer();
  await new Promise<void>((done) => probe.listen(0, '127.0.0.1', done));
  const { port } = probe.address() as { port: number };
  await new Promise((done) => probe.close(done));
  return port;
}

/** A running site, with a coordinator signed in on `api` unless `isSetUp` is false. */
export async function openSite({ isSetUp = true } = {}): Promise<Site> {
  const dataDir = mkdtempSync(join(tmpdir(), 'swaymark-site-'));
  const port = await freePort();
  const url = `http://localhost:${port}`;
  let server: TestServer | undefined;
  const site: Site = {
    url,
    api: createApiClient(url),
    async start() {
      server ??= await startServer({
        dataDir,
        port,
        host: '127.0.0.1',
        publicUrl: url,
        clientDir: join(process.cwd(), 'dist/client'),
      });
    },
    async stop() {
      await server?.stop();
      server = undefined;
    },
    server: () => server!,
    async dispose() {
      await site.stop();
      rmSync(dataDir, { recursive: true, force: true });
    },
  };
  await site.start();
  if (!isSetUp) return site;
  const { status } = await site.api.post('/api/set-up', { token: await site.server().setUpToken(), ...COORDINATOR });
  if (status !== 200) throw new Error(`set-up answered ${status}`);
  return site;
}

export interface SchoolClass {
  id: string;
  code: string;
  board_pass: string;
}

export async function makeClass(site: Site, name = 'Blue group', teacher_word = 'plumb'): Promise<SchoolClass> {
  return (await site.api.post('/api/classes', { name, teacher_word })).body.class as SchoolClass;
}
