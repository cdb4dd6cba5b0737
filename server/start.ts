import { mkdirSync, readFileSync } from 'node:fs';
import { createServer as createHttpServer, type RequestListener, type Server } from 'node:http';
import { createServer as createHttpsServer } from 'node:https';
import type { AddressInfo } from 'node:net';
import { createApp } from './app';
import type { Config } from './config';
import { lockDataDir } from './dataDirLock';
import type { Deps } from './deps';
import { createLog } from './logging';
import { createMailer } from './mail/mailer';
import { openSessions } from './middleware/sessions';
import { openDatabase } from './models/openDatabase';
import { serverEpoch } from './models/serverMeta';
import { packageVersion } from './packageRoot';
import type { RateLimits } from './rateLimits';
import { createAnalysisQueue } from './services/analysisQueue';
import { createBackgroundJobs } from './services/backgroundJobs';
import { createHasher } from './services/hasher';
import { createOpenTries } from './services/openTries';
import { createTryCounter } from './services/tryCounter';
import { whyNotStarted } from './whyNotStarted';

export interface RunningServer {
  /** Where it listens. */
  url: string;
  deps: Deps;
  /** Takes no more requests, lets those in work finish, closes the databases. Ends within five seconds. */
  stop(): Promise<void>;
}

/** Requests still open after this long are cut off, so that stopping ends within five seconds. */
const FINISH_WITHIN_MS = 3_000;

export async function startServer(config: Config, now: () => number = Date.now): Promise<RunningServer> {
  const { deps, unlock } = await openDataDir(config, now);
  const server = listener(config, createApp(deps));
  const port = await listen(server, config);
  const scheme = config.tls ? 'https' : 'http';
  deps.publicUrl = config.publicUrl ?? `${scheme}://localhost:${port}`;
  await deps.analyses.addMissing();
  let stopped: Promise<void> | undefined;
  return {
    url: `${scheme}://${config.host.includes(':') ? `[${config.host}]` : config.host}:${port}`,
    deps,
    stop: () => (stopped ??= stop(server, deps).finally(unlock)),
  };
}

async function openDataDir(config: Config, now: () => number) {
  let unlock: (() => Promise<void>) | undefined;
  try {
    mkdirSync(config.dataDir, { recursive: true, mode: 0o700 });
    unlock = await lockDataDir(config.dataDir);
    return { deps: await createDeps(config, now), unlock };
  } catch (error) {
    await unlock?.();
    throw whyNotStarted(error, config.dataDir);
  }
}

/** Everything a server is made of but its port, opened in DATA_DIR, which the caller holds for itself. */
export async function createDeps(config: Config, now: () => number): Promise<Deps> {
  const log = createLog(config);
  const database = await openDatabase(config.dataDir);
  return {
    config,
    publicUrl: config.publicUrl ?? '',
    version: packageVersion(),
    epoch: await serverEpoch(database),
    log,
    database,
    sessions: await openSessions(config),
    hasher: await createHasher(),
    mailer: await createMailer(config),
    analyses: createAnalysisQueue(database, log, now),
    background: createBackgroundJobs(log),
    tries: createTries(config.rateLimits, now),
    now,
  };
}

function createTries(limits: RateLimits, now: () => number): Deps['tries'] {
  const counter = (limit: number, words?: (minutes: number) => string) =>
    createTryCounter(limit, limits.windowMs, now, words);
  return {
    byAccount: counter(limits.failedPerAccount),
    byAccountAnywhere: counter(limits.failedPerAccountAnywhere),
    byAddress: counter(limits.failedPerAddress),
    joins: counter(
      limits.joinsPerClass,
      (minutes) => `Very many people joined this class from this network. Wait ${minutes} min, or tell the teacher.`,
    ),
    resets: counter(
      limits.resetsPerAccount,
      (minutes) => `Several links were asked for already. Look for the mail, or wait ${minutes} min.`,
    ),
    open: createOpenTries(limits.triesAtOnce),
  };
}

function listener({ tls }: Config, app: RequestListener): Server {
  if (!tls) return createHttpServer(app);
  return createHttpsServer({ cert: readFileSync(tls.certFile), key: readFileSync(tls.keyFile) }, app);
}

function listen(server: Server, { port, host }: Config): Promise<number> {
  return new Promise((resolve, reject) => {
    server.once('error', reject);
    server.listen(port, host, () => {
      server.off('error', reject);
      resolve((server.address() as AddressInfo).port);
    });
  });
}

async function stop(server: Server, deps: Deps): Promise<void> {
  const closed = new Promise((resolve) => server.close(resolve));
  server.closeIdleConnections();
  const cutOff = setTimeout(() => server.closeAllConnections(), FINISH_WITHIN_MS);
  await deps.analyses.stop();
  await closed;
  clearTimeout(cutOff);
  await deps.background.settled();
  await deps.mailer.close();
  await deps.sessions.close();
  await deps.database.close();
}
