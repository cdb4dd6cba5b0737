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
  /** @throws {MailNotSent} */
  send(mail: Mail): Promise<void>;
  close(): Promise<void>;
}

/** What a mail server says in words quotes addresses, so only its codes are kept. */
export class MailNotSent extends Error {
  readonly code: string | undefined;
  readonly responseCode: number | undefined;
  constructor({ code, responseCode }: { code?: string; responseCode?: number }) {
    super('a mail was not taken');
    this.name = 'MailNotSent';
    this.code = code;
    this.responseCode = responseCode;
  }
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
      try {
        await transport.sendMail({ from, ...mail });
      } catch (error) {
        throw new MailNotSent(error as { code?: string; responseCode?: number });
      }
    },
    async close() {
      transport.close();
      await sink?.close();
    },
  };
}
