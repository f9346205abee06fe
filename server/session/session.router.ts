import { chooseFirmRequest, sessionResponse, signInRequest } from '../../shared/session/session.schema.ts';
import { type ApiRoutes, apiRoutes, noContent, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { endSession } from './authenticate.ts';
import { chooseFirm, describeSession } from './session.service.ts';
import type { SessionStore } from './session-store.ts';
import type { SignIn } from './sign-in.ts';

/** Signing in and out, and which firm a session works for. */
export function sessionRoutes(parts: Parts, store: SessionStore, signIn: SignIn): ApiRoutes {
  const routes = apiRoutes(parts, 'Session');

  routes.add(
    {
      method: 'post',
      path: '/session',
      summary: 'Sign in',
      description: 'An unknown address and a wrong password get the same answer. Failures are throttled.',
      access: 'public',
      body: signInRequest,
      responses: { 200: sessionResponse },
      problems: ['wrongCredentials', 'noActiveFirm', 'tooManySignIns', 'otherOrigin'],
    },
    async ({ req, res, body }) => {
      req.body = body;
      const user = await signIn.withPassword(req, res);
      return ok(await describeSession(parts, { ...user, tokenScopes: null }));
    },
  );

  routes.add(
    {
      method: 'get',
      path: '/session',
      summary: 'Who is signed in, for which firm, and what they may do',
      access: 'signedIn',
      responses: { 200: sessionResponse },
    },
    async ({ actor }) => ok(await describeSession(parts, actor)),
  );

  routes.add(
    { method: 'delete', path: '/session', summary: 'Sign out', access: 'public', responses: { 204: null } },
    async ({ req }) => {
      if (req.actor?.tokenScopes === null) await endSession(req);
      return noContent();
    },
  );

  routes.add(
    {
      method: 'post',
      path: '/session/sign-out-everywhere',
      summary: 'End every session of this person, this one too',
      access: 'session',
      responses: { 204: null },
    },
    async ({ req, actor }) => {
      await store.endAllOf(actor.personId);
      await endSession(req);
      return noContent();
    },
  );

  routes.add(
    {
      method: 'post',
      path: '/session/firm',
      summary: 'Work for another of one’s firms from now on',
      access: 'session',
      body: chooseFirmRequest,
      responses: { 200: sessionResponse },
    },
    async ({ req, actor, body }) => {
      const chosen = { sid: req.sessionID, personId: actor.personId, firmId: body.firmId };
      return ok(await chooseFirm(parts, store, chosen));
    },
  );
  return routes;
}
