import { once } from 'node:events';
import { mkdir, readdir, readFile, rename, writeFile } from 'node:fs/promises';
import type { AddressInfo } from 'node:net';
import { join } from 'node:path';
import { buffer } from 'node:stream/consumers';
import { SMTPServer } from 'smtp-server';

export interface MailSink {
  url: string;
  close(): Promise<void>;
}

/**
 * A mail server that delivers nothing: it takes every mail offered on this machine and keeps it under
 * DATA_DIR/mail as 0001.eml, 0002.eml … For development, the demo and tests.
 */
export async function startMailSink(dataDir: string): Promise<MailSink> {
  const folder = mailFolder(dataDir);
  await mkdir(folder, { recursive: true });
  let last = Math.max(0, ...(await mailNames(dataDir)).map((name) => Number.parseInt(name, 10)));
  const smtp = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    onData(stream, _session, done) {
      buffer(stream)
        .then(async (mail) => {
          last += 1;
          const file = join(folder, `${String(last).padStart(4, '0')}.eml`);
          await writeFile(`${file}.part`, mail, { mode: 0o600 });
          await rename(`${file}.part`, file);
        })
        .then(() => done(), done);
    },
  });
  const server = smtp.listen(0, '127.0.0.1');
  await once(server, 'listening');
  const { port } = server.address() as AddressInfo;
  return {
    url: `smtp://127.0.0.1:${port}`,
    close: () => new Promise((resolve) => smtp.close(() => resolve())),
  };
}

/** Texts of the mails kept so far, oldest first. */
export async function keptMails(dataDir: string): Promise<string[]> {
  return Promise.all((await mailNames(dataDir)).map((name) => readFile(join(mailFolder(dataDir), name), 'utf8')));
}

const mailNames = async (dataDir: string) =>
  (await readdir(mailFolder(dataDir))).filter((name) => /^\d+\.eml$/.test(name)).sort();
const mailFolder = (dataDir: string) => join(dataDir, 'mail');
