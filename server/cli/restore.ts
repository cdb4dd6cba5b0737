import { existsSync } from 'node:fs';
import { resolve } from 'node:path';
import { readConfig } from '../config';
import { restoreDatabase } from '../services/backup';
import { runOnce } from './runOnce';

/** npm run restore -- FILE: puts a backup in the place of the database, with the server stopped. */
await runOnce(async ([file]) => {
  if (!file || !existsSync(file))
    return 'Name a backup file that is there: npm run restore -- /safe/place/swaymark.sqlite3';
  const { keptAs } = await restoreDatabase(readConfig(process.env).dataDir, resolve(file));
  process.stdout.write(`Restored from ${resolve(file)}. Phones will hand in again what it does not hold.\n`);
  process.stdout.write(
    'Everybody signs in again, with the password or PIN of the day of the backup. Links in mails sent before do not work any more.\n',
  );
  if (keptAs) process.stdout.write(`What was there before is kept as ${keptAs}\n`);
  return undefined;
});
