import {
  chooseFirmRequest,
  completePasswordReset,
  requestPasswordReset,
  sessionResponse,
  signInRequest,
} from '../../shared/session/session.schema.ts';
import { type ApiRoutes, accepted, apiRoutes, noContent, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { endSession } from './authenticate.ts';
import { finishPasswordReset, startPasswordReset } from './password-reset.service.ts';
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
      method: 'delete',
      path: '/session/everywhere',
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
      method: 'put',
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

  routes.add(
    {
      method: 'post',
      path: '/session/password-reset',
      summary: 'Ask for a link that sets a new password',
      description: 'The answer is the same whether or not the address is known. The link works once, for an hour.',
      access: 'public',
      body: requestPasswordReset,
      responses: { 202: null },
    },
    ({ req, body }) => {
      startPasswordReset(parts, body.email, req.ip ?? '');
      return accepted();
    },
  );

  routes.add(
    {
      method: 'put',
      path: '/session/password-reset',
      summary: 'Set a new password by the mailed link',
      description: 'Ends every session of the person.',
      access: 'public',
      body: completePasswordReset,
      responses: { 204: null },
    },
    async ({ body }) => {
      await finishPasswordReset(parts, body.token, body.newPassword);
      return noContent();
    },
  );
  return routes;
}
