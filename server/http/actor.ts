import type { Request } from 'express';
import {
  isPermitted,
  type Permission,
  type Role,
  TOKEN_SCOPES,
  type TokenScope,
} from '../../shared/permissions/roles.ts';
import type { Locale } from '../../shared/session/session.schema.ts';
import { Problem } from './problem.ts';

/** Who is asking, and in which firm. Read anew for every request, so that a role taken away acts at once. */
export interface Actor {
  personId: string;
  firmId: string;
  roles: readonly Role[];
  /** A reader's sites; null: all sites of the firm. */
  siteIds: readonly string[] | null;
  locale: Locale;
  /** Null: signed in by session. A token's scopes narrow what its person may do and never widen it. */
  tokenScopes: readonly TokenScope[] | null;
}

declare module 'http' {
  interface IncomingMessage {
    actor?: Actor;
  }
}

export function actorOf(req: Request): Actor {
  if (!req.actor) throw new Problem('signInRequired');
  return req.actor;
}

export function mayActor(actor: Actor, permission: Permission): boolean {
  if (!isPermitted(permission, actor.roles)) return false;
  if (actor.tokenScopes === null) return true;
  return actor.tokenScopes.some((scope) => (TOKEN_SCOPES[scope] as readonly Permission[]).includes(permission));
}

/** @throws Problem 401 without sign-in, 403 without the permission */
export function requirePermission(req: Request, permission: Permission): Actor {
  const actor = actorOf(req);
  if (!mayActor(actor, permission)) throw new Problem('notPermitted', { params: { permission } });
  return actor;
}

/** @throws Problem 401 without sign-in, 403 with a token: what concerns the account itself is the person's alone */
export function requireSession(req: Request): Actor {
  const actor = actorOf(req);
  if (actor.tokenScopes !== null) throw new Problem('notPermitted', { params: { permission: 'session' } });
  return actor;
}
