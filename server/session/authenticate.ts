import type { Request, RequestHandler } from 'express';
import type { Parts } from '../http/parts.ts';
import { actorOfToken } from '../tokens/token-actor.ts';
import { findStanding } from './actor-look-up.ts';
import { poolOf } from './pool.ts';
import { ABSOLUTE_LIMIT_MS, type SessionStore, type SessionUser } from './session-store.ts';

/**
 * Finds out who is asking. A request with `Authorization` stands on its token alone and never looks at the cookie; any
 * other on its session. Without either there is no actor, which public routes accept.
 */
export function authenticate(parts: Parts, store: SessionStore, session: RequestHandler): RequestHandler {
  return async (req, res, next) => {
    const authorization = req.get('authorization');
    if (authorization !== undefined) {
      req.actor = await actorOfToken(parts, authorization);
      return next();
    }
    await new Promise<void>((resolve, reject) => {
      void session(req, res, (error?: unknown) => (error ? reject(error) : resolve()));
    });
    const user = req.session.passport?.user;
    if (user) await takeSession(parts, store, req, user);
    next();
  };
}

/** A session that has run out, or whose person may no longer enter the firm, is ended on the spot. */
async function takeSession(parts: Parts, store: SessionStore, req: Request, user: SessionUser): Promise<void> {
  const now = parts.now().getTime();
  const signedInAt = Date.parse(user.signedInAt);
  const expired = now - signedInAt > ABSOLUTE_LIMIT_MS; // the idle limit is the row's own: the store no longer finds it
  const standing = expired ? null : await findStanding(poolOf(parts.dataSource), user.personId, user.firmId);
  const outlived = standing?.passwordChangedAt && signedInAt < standing.passwordChangedAt.getTime();
  if (!standing || outlived) {
    await endSession(req);
    return;
  }
  req.actor = {
    personId: user.personId,
    firmId: user.firmId,
    roles: standing.roles,
    siteIds: standing.siteIds,
    locale: standing.locale,
    tokenScopes: null,
  };
  parts.background.run('note that a session was used', () => store.noteSeen(req.sessionID, user));
}

/** Ends this session only; the cookie that is left names nothing. */
export function endSession(req: Request): Promise<void> {
  return new Promise((resolve, reject) => {
    req.session.destroy((error: unknown) => (error ? reject(error) : resolve()));
  });
}
