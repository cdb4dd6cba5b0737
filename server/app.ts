import compression from 'compression';
import express, { type Express } from 'express';
import { rateLimit } from 'express-rate-limit';
import type { Deps } from './deps';
import { AppError } from './errors';
import { answerErrors, unknownApiRoute } from './middleware/answerErrors';
import { addressOf } from './middleware/limitTries';
import { mountRoutes } from './middleware/mountRoutes';
import { requestLog } from './middleware/requestLog';
import { sameOrigin } from './middleware/sameOrigin';
import { securityHeaders } from './middleware/securityHeaders';
import { staticClient } from './middleware/staticClient';
import type { RateLimits } from './rateLimits';
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
    deps.sessions.middleware,
    requestRate(config.rateLimits),
    sameOrigin(() => deps.publicUrl),
  );
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

/** By sign-in where there is one, so that one phone cannot use up what a school behind one address needs. */
const requestRate = ({ requestsPerSignIn, requestsPerAddress }: RateLimits) =>
  rateLimit({
    windowMs: 60_000,
    limit: (req) => (req.session.signInId ? requestsPerSignIn : requestsPerAddress),
    keyGenerator: (req) => req.session.signInId ?? addressOf(req),
    skip: (req) => req.path === '/health',
    standardHeaders: 'draft-8',
    legacyHeaders: false,
    handler: (req, _res, next) => {
      const from = req.session.signInId ? 'this sign-in' : 'this network';
      next(new AppError(429, 'too_many_requests', `Too many requests come from ${from}. Wait a minute.`));
    },
  });
