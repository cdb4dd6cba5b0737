import type { Logger } from 'pino';
import type { Config } from './config';
import type { Mailer } from './mail/mailer';
import type { Sessions } from './middleware/sessions';
import type { Database } from './models/openDatabase';
import type { AnalysisQueue } from './services/analysisQueue';
import type { BackgroundJobs } from './services/backgroundJobs';
import type { Hasher } from './services/hasher';
import type { OpenTries } from './services/openTries';
import type { TryCounter } from './services/tryCounter';

/** What the parts of one running server share. Made by startServer, handed to every route. */
export interface Deps {
  config: Config;
  /** Address that links in mails and on the console start with. */
  publicUrl: string;
  version: string;
  epoch: string;
  log: Logger;
  database: Database;
  sessions: Sessions;
  hasher: Hasher;
  mailer: Mailer;
  analyses: AnalysisQueue;
  background: BackgroundJobs;
  /** See RateLimits for what each one counts. */
  tries: {
    byAccount: TryCounter;
    byAccountAnywhere: TryCounter;
    byAddress: TryCounter;
    joins: TryCounter;
    resets: TryCounter;
    open: OpenTries;
  };
  /** Milliseconds since 1970. */
  now(): number;
}
