import type { RequestHandler } from 'express';
import { Problem } from './problem.ts';

const READING = new Set(['GET', 'HEAD', 'OPTIONS']);

/**
 * Refuses a change that another site's page sends with our cookie. A browser names the sender in `Origin` and
 * `Sec-Fetch-Site`; the allowed origin comes from the settings, never from the Host header. Requests without our
 * cookie carry no one's rights and pass, as do those with a token (which never look at the cookie).
 */
export function originCheck(
  allowedOrigins: readonly string[],
  carriesCookie: (cookieHeader: string) => boolean,
): RequestHandler {
  return (req, _res, next) => {
    if (READING.has(req.method) || req.headers.authorization !== undefined) return next();
    if (!carriesCookie(req.headers.cookie ?? '')) return next();
    const site = req.get('sec-fetch-site');
    const origin = req.get('origin');
    const ours = origin === undefined ? site === 'same-origin' : allowedOrigins.includes(origin);
    if (!ours || (site !== undefined && site !== 'same-origin')) throw new Problem('otherOrigin');
    next();
  };
}
