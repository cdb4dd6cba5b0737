import type { Request, RequestHandler } from 'express';
import { AppError } from '../errors';

/**
 * Lets a request that changes something through only when our own pages sent it. Another site can
 * send neither the header without asking first, nor JSON, nor hide where it comes from; each of the
 * three would do. Checks read the request alone, so a phone that was offline for days passes.
 */
export function sameOrigin(publicUrl: () => string): RequestHandler {
  return (req, _res, next) => {
    if (req.method === 'GET' || req.method === 'HEAD') return next();
    if (req.get('X-Swaymark') !== '1') {
      throw new AppError(
        403,
        'header_missing',
        'This request did not come from a Swaymark page: X-Swaymark is missing.',
      );
    }
    if (!comesFromHere(req, publicUrl())) {
      throw new AppError(403, 'other_origin', 'This request came from a page of another site, so nothing was done.');
    }
    if (hasBody(req) && !req.is('application/json')) {
      throw new AppError(415, 'json_only', 'This request is not JSON. Send it as application/json.');
    }
    next();
  };
}

function comesFromHere(req: Request, publicUrl: string): boolean {
  const site = req.get('Sec-Fetch-Site');
  if (site !== undefined) return site === 'same-origin';
  const origin = req.get('Origin');
  return origin === undefined || origin === `${req.protocol}://${req.host}` || origin === new URL(publicUrl).origin;
}

const hasBody = (req: Request) =>
  req.get('Transfer-Encoding') !== undefined || Number(req.get('Content-Length') ?? 0) > 0;
