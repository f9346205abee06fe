import type { RequestHandler } from 'express';
import helmet from 'helmet';

/**
 * No script and no style but our own files, no frame around us, nothing fetched from elsewhere. Over plain HTTP (the
 * loopback of a first start) nothing may demand HTTPS, or the browser could not load the page.
 */
export function securityHeaders(publicUrl: string): RequestHandler[] {
  const secure = publicUrl.startsWith('https:');
  return [
    helmet({
      contentSecurityPolicy: {
        useDefaults: false,
        directives: {
          defaultSrc: ["'self'"],
          scriptSrc: ["'self'"],
          styleSrc: ["'self'"],
          imgSrc: ["'self'", 'data:', 'blob:'],
          fontSrc: ["'self'"],
          connectSrc: ["'self'"],
          workerSrc: ["'self'"],
          manifestSrc: ["'self'"],
          objectSrc: ["'none'"],
          baseUri: ["'none'"],
          formAction: ["'self'"],
          frameAncestors: ["'none'"],
          ...(secure ? { upgradeInsecureRequests: [] } : {}),
        },
      },
      strictTransportSecurity: secure ? { maxAge: 31_536_000, includeSubDomains: false } : false,
      referrerPolicy: { policy: 'same-origin' },
      crossOriginEmbedderPolicy: false,
    }),
    (_req, res, next) => {
      res.set('Permissions-Policy', 'camera=(self), microphone=(), geolocation=(), payment=()');
      next();
    },
  ];
}
