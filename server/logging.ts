import { pino, type Logger } from 'pino';
import type { Config } from './config';

/** Structured lines on standard output. Nothing that could open a door is ever given to it. */
export const createLog = (config: Config): Logger => pino({ level: config.logLevel, base: null });
