import { existsSync } from 'node:fs';
import { resolve } from 'node:path';
import { backupDatabase } from '../services/backup';
import { readConfig } from '../config';
import { runOnce } from './runOnce';

/** npm run backup -- FILE: a whole copy of the database, with the server running or not. */
await runOnce(async ([file]) => {
  if (!file) return 'Name the file to write: npm run backup -- /safe/place/swaymark.sqlite3';
  if (existsSync(file)) return `${file} is there already. Name another file: a backup never replaces one.`;
  await backupDatabase(readConfig(process.env).dataDir, resolve(file));
  process.stdout.write(`Backup written and checked: ${resolve(file)}\n`);
  return undefined;
});
