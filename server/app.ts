import compression from 'compression';
import express, { type Express } from 'express';
import { rateLimit } from 'express-rate-limit';
import type { Deps } from './deps';
import { AppError } from './errors';
import { answerErrors, unknownApiRoute } from './middleware/answerErrors';
import { mountRoutes } from './middleware/mountRoutes';
import { requestLog } from './middleware/requestLog';
import { sameOrigin } from './middleware/sameOrigin';
import { securityHeaders } from './middleware/securityHeaders';
import { staticClient } from './middleware/staticClient';
import { routes } from './routes/index';

/** The whole application on one Express app; it listens nowhere by itself. */
export function createApp(deps: Deps): Express {
  const { config } = deps;
  const app = express();
  app.disable('x-powered-by');
  app.set('trust proxy', config.trustProxyHops);
  app.use(requestLog(deps.log), securityHeaders(config.isHttps), compression());
  app.use(
    '/api',
    neverStored,
    requestRate(config.rateLimits.requestsPerMinute),
    sameOrigin(() => deps.publicUrl),
  );
  app.use('/api', deps.sessions.middleware);
  mountRoutes(app, routes, deps);
  app.use('/api', unknownApiRoute);
  if (config.clientDir) app.use(staticClient(config.clientDir));
  app.use(answerErrors);
  return app;
}

const neverStored: express.RequestHandler = (_req, res, next) => {
  res.set('Cache-Control', 'no-store');
  next();
};

const requestRate = (limit: number) =>
  rateLimit({
    windowMs: 60_000,
    limit,
    standardHeaders: 'draft-8',
    legacyHeaders: false,
    handler: (_req, _res, next) =>
      next(new AppError(429, 'too_many_requests', 'Too many requests come from this network. Wait a minute.')),
  });
