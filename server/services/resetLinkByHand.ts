import { existsSync } from 'node:fs';
import { join } from 'node:path';
import { ConfigError, type Config } from '../config';
import { lockDataDir } from '../dataDirLock';
import { DATABASE_FILE, openDatabase } from '../models/openDatabase';
import { noteActivity } from './activity';
import { createResetLink } from './staffAccounts';

/**
 * A link to choose a new password, for whoever runs the server: the way back in for the last coordinator
 * where no mail is set up. Works on the files, so the server is not to be running.
 *
 * @throws {ConfigError} when a server is running on the folder, or no open account has this address
 */
export async function makeResetLink(
  { dataDir, publicUrl, port, tls }: Config,
  email: string,
  now: () => number = Date.now,
): Promise<string> {
  if (!existsSync(join(dataDir, DATABASE_FILE)))
    throw new ConfigError(`There is no database in ${dataDir}: set DATA_DIR to the server's.`);
  const unlock = await lockDataDir(dataDir);
  try {
    const database = await openDatabase(dataDir);
    try {
      const account = await database.models.StaffAccount.findOne({ where: { email } });
      if (!account) throw new ConfigError(`No account has the address ${email}. Check how it is written.`);
      if (account.disabled_ms !== null)
        throw new ConfigError(`The account of ${email} is shut. A coordinator opens it again under People.`);
      const deps = { database, now, publicUrl: publicUrl ?? `${tls ? 'https' : 'http'}://localhost:${port}` };
      return await database.writeTransaction(async (transaction) => {
        await noteActivity(deps, { kind: 'nobody' }, 'people.reset_link', account.id, transaction);
        return createResetLink(deps, account.id, transaction);
      });
    } finally {
      await database.close();
    }
  } finally {
    await unlock();
  }
}
