import { once } from 'node:events';
import { mkdtempSync, rmSync } from 'node:fs';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { SMTPServer } from 'smtp-server';
import { afterEach, expect, test } from 'vitest';
import { createApiClient } from './helpers/apiClient';
import { must, PASSWORD } from './helpers/people';
import { startProcess, type ServerProcess } from './helpers/serverProcess';

const dataDir = mkdtempSync(join(tmpdir(), 'swaymark-mail-'));
let running: ServerProcess | undefined;
let refusing: SMTPServer;
afterEach(async () => {
  await running?.end('SIGKILL');
  await new Promise<void>((resolve) => refusing.close(resolve));
  rmSync(dataDir, { recursive: true, force: true });
});

test('a mail that was not taken is logged by its codes, without the address the mail server repeats', async () => {
  refusing = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    onRcptTo: ({ address }, _session, done) =>
      done(Object.assign(new Error(`no mailbox <${address}> here`), { responseCode: 550 })),
  });
  const smtp = refusing.listen(0, '127.0.0.1');
  await once(smtp, 'listening');
  const { port } = smtp.address() as AddressInfo;
  running = await startProcess({ DATA_DIR: dataDir, SMTP_URL: `smtp://127.0.0.1:${port}` });
  const { url, setUpToken, output } = running;
  const lead = createApiClient(url);
  const wanted = { name: 'Lead', email: 'lead@example.org', password: PASSWORD };
  must(await lead.post('/api/set-up', { token: setUpToken, ...wanted }));
  const reply = await lead.post('/api/invites', { email: 'mira@example.org', role: 'teacher' });
  expect(reply.body.error.code).toBe('mail_not_sent');
  must(await lead.post('/api/password/forgot', { email: 'lead@example.org' }));
  await expect.poll(() => output().match(/"responseCode":550/g)?.length).toBe(2);
  await running.end('SIGTERM');
  running = undefined;
  expect(output()).toContain('"code":"EENVELOPE"');
  expect(output()).not.toMatch(/example\.org|no mailbox/);
}, 120_000);
