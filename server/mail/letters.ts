import type { StaffRole } from '@shared/schemas/accounts';
import type { Mail } from './mailer';

/** The mails the server writes. Plain text; each link stands on a line of its own. */

export const inviteLetter = (to: string, role: StaffRole, link: string): Mail => ({
  to,
  subject: 'You are invited to Swaymark',
  text: [
    `You have been invited to Swaymark as ${role}. Open this link to choose your name and password:`,
    '',
    link,
    '',
    'The link works once, for seven days. If you did not expect it, do nothing.',
    '',
  ].join('\n'),
});

export const resetLetter = (to: string, link: string): Mail => ({
  to,
  subject: 'Choose a new Swaymark password',
  text: [
    'Somebody asked for a new password for this address. Open this link to choose one:',
    '',
    link,
    '',
    'The link works once, for thirty minutes. If it was not you, do nothing: your password stays as it is.',
    '',
  ].join('\n'),
});
