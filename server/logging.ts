import { pino, type Logger } from 'pino';
import type { Config } from './config';

/** Structured lines on standard output. Nothing that could open a door is ever given to it. */
export const createLog = (config: Config): Logger =>
  pino({ level: config.logLevel, base: null, serializers: { err: errorForLog } });

/** Not every field of an error: those of the database carry the statement and what was bound to it. */
function errorForLog(error: unknown) {
  if (!(error instanceof Error)) return { message: String(error) };
  const { name, message, stack } = error;
  const { code, responseCode } = error as { code?: string; responseCode?: number };
  return { name, code, responseCode, message, stack };
}
