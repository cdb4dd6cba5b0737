import { promisify } from 'node:util';
import type { Request, Response } from 'express';
import type { Deps } from '../deps';
import { AppError } from '../errors';
import { createSignIn, revokeSignIn, SIGN_IN_LIMITS, type Proven } from '../services/signIns';

/**
 * Signs a person in on this device: a new session id, whatever was there before, and the old sign-in
 * of this device ended. Saved before it returns, so the answer never runs ahead of the session.
 */
export async function startSession(deps: Deps, req: Request, proven: Proven): Promise<void> {
  const before = req.session.signInId;
  const signInId = await createSignIn(deps, proven);
  if (before) await revokeSignIn(deps, before);
  try {
    await promisify(req.session.regenerate.bind(req.session))();
    req.session.signInId = signInId;
    req.session.cookie.maxAge = SIGN_IN_LIMITS[proven.kind].absoluteMs;
    await promisify(req.session.save.bind(req.session))();
  } catch (error) {
    req.log.error({ err: error }, 'a sign-in could not be kept');
    throw new AppError(
      503,
      'sign_in_not_kept',
      'The server did what was asked, but could not keep the sign-in on this device. Try again; an account that was just made can sign in.',
    );
  }
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
