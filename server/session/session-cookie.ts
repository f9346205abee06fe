import type { RequestHandler } from 'express';
import session from 'express-session';
import { isLoopbackName } from '../http/loopback.ts';
import { ABSOLUTE_LIMIT_MS, type SessionStore } from './session-store.ts';

/** Secure everywhere but on loopback, where a first start has no TLS; a secure one is bound to this host by its name. */
export function sessionCookie(publicUrl: string): { name: string; secure: boolean } {
  const secure = !isLoopbackName(new URL(publicUrl).hostname);
  return { name: secure ? '__Host-tarewright' : 'tarewright', secure };
}

export function carriesCookie(name: string, cookieHeader: string): boolean {
  return cookieHeader.split(';').some((pair) => pair.trim().startsWith(`${name}=`));
}

/** The id changes at sign-in (passport makes the session anew), and nothing is stored or set before that. */
export function sessionMiddleware(publicUrl: string, secret: string, store: SessionStore): RequestHandler {
  const { name, secure } = sessionCookie(publicUrl);
  return session({
    name,
    secret,
    store,
    resave: false,
    rolling: false,
    saveUninitialized: false,
    unset: 'destroy',
    // A proxy that ends TLS says so in X-Forwarded-Proto. Whoever lies about it only sends their own cookie in the open.
    proxy: true,
    cookie: { httpOnly: true, sameSite: 'lax', secure, path: '/', maxAge: ABSOLUTE_LIMIT_MS },
  });
}
