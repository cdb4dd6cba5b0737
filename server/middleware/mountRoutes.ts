import express, { type Express, type Request, type RequestHandler } from 'express';
import type { z } from 'zod';
import { MAX_BODY_BYTES } from '@shared/schemas/limits';
import { plainMessage } from '@shared/schemas/plainMessage';
import type { Deps } from '../deps';
import { badInput } from '../errors';
import type { Actor } from '../policies/actor';
import { authorise, type Scope } from '../policies/permissions';
import type { Route } from '../routes/route';
import { withTryLimit } from './limitTries';
import { loadActor } from './loadActor';
import { fieldMessages } from './fieldMessages';

/** Body of a request by nobody, bytes: the longest form at the doors, with every sign written as an escape, fits. */
const MAX_NOBODY_BYTES = 8_000;

interface Admitted {
  actor: Actor;
  scope: Scope;
}

/**
 * Mounts every route of the list with the same steps in the same order; no route has a way around one.
 * Nothing of a body is read before its sender may use the route.
 */
export function mountRoutes(app: Express, routes: readonly Route[], deps: Deps): void {
  for (const route of routes) app[route.method](route.path, admit(route, deps), parseBody(route), serve(route, deps));
}

function admit(route: Route, deps: Deps): RequestHandler {
  return async (req, res, next) => {
    res.locals.admitted = await admitted(route, deps, req);
    next();
  };
}

async function admitted(route: Route, deps: Deps, req: Request): Promise<Admitted> {
  const actor = await loadActor(deps, req);
  return { actor, scope: authorise(actor, route.action) };
}

function parseBody(route: Route): RequestHandler {
  const ofNobody = express.json({ limit: MAX_NOBODY_BYTES });
  const ofOthers = express.json({ limit: route.maxBytes ?? MAX_BODY_BYTES });
  return (req, res, next) => {
    const { actor } = res.locals.admitted as Admitted;
    return (actor.kind === 'nobody' ? ofNobody : ofOthers)(req, res, next);
  };
}

function serve(route: Route, deps: Deps): RequestHandler {
  return async (req, res) => {
    // A body can take its time, and the right to send it may have ended meanwhile.
    const isLater = req.body !== undefined;
    const { actor, scope } = isLater ? await admitted(route, deps, req) : (res.locals.admitted as Admitted);
    const params = read(route.params, req.params);
    const query = read(route.query, req.query);
    const body = read(route.body, req.body);
    const run = async () => route.handler({ deps, actor, scope, params, query, body, http: { req, res } });
    const answer: unknown = route.limitTries ? await withTryLimit(deps, route.limitTries, req, body, run) : await run();
    if (deps.config.checkAnswers) route.answer.parse(answer);
    res.json(answer);
  };
}

function read(schema: z.ZodType | undefined, given: unknown): unknown {
  if (!schema) return undefined;
  const result = schema.safeParse(given, { error: plainMessage });
  if (!result.success) throw badInput(fieldMessages(result.error.issues));
  return result.data;
}
