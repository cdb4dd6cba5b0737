import { ConfigError } from './config';

const DAMAGED = ['SQLITE_NOTADB', 'SQLITE_CORRUPT'];
const NOT_WRITABLE = [
  'EACCES',
  'EPERM',
  'EROFS',
  'ENOTDIR',
  'EEXIST',
  'ENOSPC',
  'SQLITE_CANTOPEN',
  'SQLITE_READONLY',
  'SQLITE_FULL',
];

/** Why DATA_DIR could not be used, in words for whoever runs the server; anything unforeseen as it is. */
export function whyNotStarted(error: unknown, dataDir: string): unknown {
  const { code, original } = error as { code?: string; original?: { code?: string } };
  const seen = code ?? original?.code ?? '';
  if (DAMAGED.includes(seen)) {
    return new ConfigError(
      `A database in ${dataDir} is damaged (${seen}). Put a backup in its place, which keeps the damaged files aside:\n` +
        '  npm run restore -- /safe/place/swaymark.sqlite3',
    );
  }
  if (NOT_WRITABLE.includes(seen)) {
    return new ConfigError(
      `The server cannot write in ${dataDir} (${seen}). Give its user the right and the room to, or set DATA_DIR to another folder.`,
    );
  }
  return error;
}
