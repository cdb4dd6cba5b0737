import type { Request, Response } from 'express';
import type { z } from 'zod';
import type { Deps } from '../deps';
import type { Actor } from '../policies/actor';
import type { Action, Scope } from '../policies/permissions';

/** What a handler is given: everything read, checked and allowed. */
export interface Call<Params, Query, Body> {
  deps: Deps;
  actor: Actor;
  /** How far the actor's right reaches; services keep within it. */
  scope: Scope;
  params: Params;
  query: Query;
  body: Body;
  /** Only for the session: handlers neither read the request nor write the answer. */
  http: { req: Request; res: Response };
}

/** Tries that failed are counted: where an account is named by that account, else by address. */
export interface TryLimit<Body> {
  account?: (body: Body) => string;
  /** The few tries are the account's, wherever they come from: for a PIN, which has only a million values. */
  fromAnywhere?: true;
}

export interface RouteSpec<Params, Query, Body, Answer> {
  method: 'get' | 'post' | 'delete';
  /** As Express writes it: /api/classes/:id */
  path: `/api/${string}`;
  action: Action;
  /** One line for the API description. */
  summary: string;
  params?: z.ZodType<Params>;
  query?: z.ZodType<Query>;
  body?: z.ZodType<Body>;
  answer: z.ZodType<Answer>;
  maxBytes?: number;
  limitTries?: TryLimit<Body>;
  handler(call: Call<Params, Query, Body>): Promise<Answer> | Answer;
}

/** A route of any shape, as the registrar and the API description see it. */
// eslint-disable-next-line @typescript-eslint/no-explicit-any -- each route's own types were checked by route()
export type Route = RouteSpec<any, any, any, any>;

/** Lets TypeScript check a handler against the schemas beside it. */
export function route<Params = undefined, Query = undefined, Body = undefined, Answer = unknown>(
  spec: RouteSpec<Params, Query, Body, Answer>,
): Route {
  return spec;
}
