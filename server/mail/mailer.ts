import nodemailer from 'nodemailer';
import type { Config } from '../config';
import { startMailSink } from './mailSink';

export interface Mail {
  to: string;
  subject: string;
  text: string;
}

export interface Mailer {
  /** False when no e-mail is set up: what a mail would say must reach the person in another way. */
  sends: boolean;
  send(mail: Mail): Promise<void>;
  close(): Promise<void>;
}

/** Plain text over SMTP, to the server named in SMTP_URL or to the local sink. */
export async function createMailer(config: Config): Promise<Mailer> {
  if (config.mail.kind === 'none') {
    return { sends: false, send: async () => undefined, close: async () => undefined };
  }
  const sink = config.mail.kind === 'sink' ? await startMailSink(config.dataDir) : null;
  const { from } = config.mail;
  const transport = nodemailer.createTransport(config.mail.kind === 'smtp' ? config.mail.url : sink!.url);
  return {
    sends: true,
    async send(mail) {
      await transport.sendMail({ from, ...mail });
    },
    async close() {
      transport.close();
      await sink?.close();
    },
  };
}
