import type { RequestHandler } from 'express';
import helmet from 'helmet';

/**
 * Everything from this origin alone and no script or style in the page's text. Cross-origin isolation
 * (COOP and COEP) is on because it lets browsers step the event clock finer. Installed phones keep the
 * headers they were installed with until index.html changes.
 */
export function securityHeaders(isHttps: boolean): RequestHandler[] {
  const self = ["'self'"];
  return [
    helmet({
      contentSecurityPolicy: {
        useDefaults: false,
        directives: {
          defaultSrc: ["'none'"],
          scriptSrc: self,
          styleSrc: self,
          fontSrc: self,
          imgSrc: ["'self'", 'data:', 'blob:'],
          mediaSrc: ["'self'", 'blob:'],
          connectSrc: self,
          workerSrc: self,
          manifestSrc: self,
          formAction: self,
          baseUri: ["'none'"],
          frameAncestors: ["'none'"],
        },
      },
      crossOriginEmbedderPolicy: { policy: 'require-corp' },
      crossOriginOpenerPolicy: { policy: 'same-origin' },
      crossOriginResourcePolicy: { policy: 'same-origin' },
      referrerPolicy: { policy: 'no-referrer' },
      strictTransportSecurity: isHttps ? { maxAge: 31_536_000, includeSubDomains: false } : false,
      xFrameOptions: { action: 'deny' },
    }),
    (_req, res, next) => {
      res.set(
        'Permissions-Policy',
        'camera=(self), screen-wake-lock=(self), microphone=(), geolocation=(), payment=(), usb=()',
      );
      next();
    },
  ];
}
