import express, { type Express, type RequestHandler } from 'express';
import type { z } from 'zod';
import { MAX_BODY_BYTES } from '@shared/schemas/limits';
import { plainMessage } from '@shared/schemas/plainMessage';
import type { Deps } from '../deps';
import { badInput } from '../errors';
import { authorise } from '../policies/permissions';
import type { Route } from '../routes/route';
import { withTryLimit } from './limitTries';
import { loadActor } from './loadActor';
import { fieldMessages } from './fieldMessages';

/** Mounts every route of the list with the same steps in the same order; no route has a way around one. */
export function mountRoutes(app: Express, routes: readonly Route[], deps: Deps): void {
  for (const route of routes) {
    const parseBody = express.json({ limit: route.maxBytes ?? MAX_BODY_BYTES, strict: true });
    app[route.method](route.path, parseBody, serve(route, deps));
  }
}

function serve(route: Route, deps: Deps): RequestHandler {
  return async (req, res) => {
    const params = read(route.params, req.params);
    const query = read(route.query, req.query);
    const body = read(route.body, req.body);
    const actor = await loadActor(deps, req);
    const scope = authorise(actor, route.action);
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
