import { promisify } from 'node:util';
import type { Request, Response } from 'express';
import type { Deps } from '../deps';
import type { SignIn } from '../models/SignIn';
import { createSignIn, revokeSignIn, SIGN_IN_LIMITS } from '../services/signIns';

/**
 * Signs a person in on this device: a new session id, whatever was there before, and the old sign-in
 * of this device ended. Saved before it returns, so the answer never runs ahead of the session.
 */
export async function startSession(
  deps: Deps,
  req: Request,
  actorKind: SignIn['actor_kind'],
  actorId: string,
): Promise<void> {
  const before = req.session.signInId;
  if (before) await revokeSignIn(deps, before);
  await promisify(req.session.regenerate.bind(req.session))();
  req.session.signInId = await createSignIn(deps, actorKind, actorId);
  req.session.cookie.maxAge = SIGN_IN_LIMITS[actorKind].absoluteMs;
  await promisify(req.session.save.bind(req.session))();
}

/** Ends the sign-in in the database first: from then on no session can bring it back. */
export async function endSession(deps: Deps, req: Request, res: Response): Promise<void> {
  const { signInId } = req.session;
  if (signInId) await revokeSignIn(deps, signInId);
  await promisify(req.session.destroy.bind(req.session))();
  res.clearCookie(deps.sessions.cookieName, {
    path: '/',
    httpOnly: true,
    sameSite: 'lax',
    secure: deps.config.isHttps,
  });
}
