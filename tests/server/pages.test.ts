import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { startServer, type TestServer } from '../support/startServer';
import { createApiClient } from './helpers/apiClient';

let server: TestServer;
let clientDir: string;
beforeAll(async () => {
  clientDir = mkdtempSync(join(tmpdir(), 'swaymark-pages-'));
  mkdirSync(join(clientDir, 'assets'));
  writeFileSync(join(clientDir, 'index.html'), '<!doctype html><title>Swaymark</title>');
  writeFileSync(join(clientDir, 'sw.js'), '// worker');
  writeFileSync(join(clientDir, 'assets', 'index-Ab12.js'), 'export default 1;'.repeat(200));
  server = await startServer({ clientDir });
});
afterAll(async () => {
  await server.stop();
  rmSync(clientDir, { recursive: true, force: true });
});
const get = (path: string, headers = {}) => createApiClient(server.url).get(path, { headers });

test.each(['/', '/bench/pad', '/set-up/abc', '/board/x-y_z', '/desk/runs/7f3'])(
  '%s is the app, asked for anew each time',
  async (path) => {
    const reply = await get(path);
    expect([reply.status, reply.headers.get('Cache-Control')]).toEqual([200, 'no-cache']);
    expect(reply.text).toContain('<title>Swaymark</title>');
  },
);

test('files named by their content are kept for ever and compressed, the worker is asked for anew', async () => {
  const asset = await get('/assets/index-Ab12.js');
  expect(asset.headers.get('Cache-Control')).toBe('public, max-age=31536000, immutable');
  expect(asset.headers.get('Content-Encoding')).toMatch(/gzip|br/);
  expect((await get('/sw.js')).headers.get('Cache-Control')).toBe('no-cache');
});

test('a file that is gone is told as gone, never as a page', async () => {
  const reply = await get('/assets/index-Old1.js');
  expect(reply.status).toBe(404);
  expect(reply.text).not.toContain('<title>');
});

test.each(['/../package.json', '/%2e%2e/package.json', '/..%2fpackage.json', '/.git/config'])(
  '%s does not leave the folder',
  async (path) => {
    expect((await get(path)).text).not.toMatch(/swaymark"|\[core\]/);
  },
);

test('an unknown API address is never the app', async () => {
  const reply = await get('/api/anything', { Accept: 'text/html' });
  expect([reply.status, reply.body.error.code]).toEqual([404, 'no_such_route']);
});

test('every answer carries the security headers', async () => {
  for (const path of ['/', '/assets/index-Ab12.js', '/api/health', '/api/none']) {
    const { headers } = await get(path);
    const policy = headers.get('Content-Security-Policy')!;
    expect(policy).toContain("default-src 'none'");
    expect(policy).toContain("script-src 'self'");
    expect(policy).toContain("frame-ancestors 'none'");
    expect(policy).not.toMatch(/unsafe|https?:|\*/);
    expect(headers.get('X-Content-Type-Options')).toBe('nosniff');
    expect(headers.get('Referrer-Policy')).toBe('no-referrer');
    expect(headers.get('Cross-Origin-Opener-Policy')).toBe('same-origin');
    expect(headers.get('Permissions-Policy')).toContain('geolocation=()');
    expect(headers.get('X-Powered-By')).toBeNull();
    expect(headers.get('Strict-Transport-Security')).toBeNull();
  }
});

test('over https browsers are told to stay there', async () => {
  const secure = await startServer({ isHttps: true, trustProxyHops: 1, clientDir });
  const reply = await createApiClient(secure.url).get('/');
  expect(reply.headers.get('Strict-Transport-Security')).toMatch(/^max-age=31536000/);
  await secure.stop();
});
