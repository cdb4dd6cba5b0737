import { Email } from '@shared/schemas/accounts';
import { readConfig } from '../config';
import { makeResetLink } from '../services/resetLinkByHand';
import { runOnce } from './runOnce';

/** npm run reset-link -- EMAIL: a link to choose a new password, with the server stopped. */
await runOnce(async ([typed]) => {
  const email = Email.safeParse(typed ?? '');
  if (!email.success) return 'Name the e-mail address of the account: npm run reset-link -- name@example.org';
  const link = await makeResetLink(readConfig(process.env), email.data);
  process.stdout.write(`Start the server, then open this link within half an hour. It works once.\n${link}\n`);
  return undefined;
});
