import { mkdtempSync, readdirSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import nodemailer from 'nodemailer';
import { expect, test } from 'vitest';
import { keptMails, startMailSink } from '../../server/mail/mailSink';

test('a mail never takes the place of another, also after an earlier one was deleted', async () => {
  const dataDir = mkdtempSync(join(tmpdir(), 'swaymark-mail-'));
  const folder = join(dataDir, 'mail');
  await send(dataDir, 'one', 'two', 'three');
  rmSync(join(folder, '0001.eml'));
  await send(dataDir, 'four');
  expect(readdirSync(folder)).toEqual(['0002.eml', '0003.eml', '0004.eml']);
  expect((await keptMails(dataDir)).map((mail) => /Subject: (\w+)/.exec(mail)?.[1])).toEqual(['two', 'three', 'four']);
  rmSync(dataDir, { recursive: true });
});

/** By a sink of its own, as after a new start. */
async function send(dataDir: string, ...subjects: string[]): Promise<void> {
  const sink = await startMailSink(dataDir);
  const transport = nodemailer.createTransport(sink.url);
  for (const subject of subjects) {
    await transport.sendMail({ from: 'a@example.org', to: 'b@example.org', subject, text: 'x' });
  }
  transport.close();
  await sink.close();
}
