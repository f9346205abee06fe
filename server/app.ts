import compression from 'compression';
import express, { type Express } from 'express';
import { RESOURCES } from './api.ts';
import { calculationRoutes } from './calculations/calculations.router.ts';
import { clientErrorRoutes } from './http/client-errors.ts';
import { clientFiles } from './http/client-files.ts';
import { healthRoutes } from './http/health.ts';
import { ownOrigins } from './http/loopback.ts';
import { methodCheck } from './http/method-check.ts';
import { originCheck } from './http/origin-check.ts';
import type { Parts } from './http/parts.ts';
import { Problem } from './http/problem.ts';
import { problemHandler } from './http/problem-handler.ts';
import { problemListRoutes } from './http/problem-list.ts';
import { requestLog } from './http/request-log.ts';
import { securityHeaders } from './http/security-headers.ts';
import { invitationRoutes } from './invitations/invitations.router.ts';
import { keptMailPage } from './mail/kept-mail-page.ts';
import { openApiRoutes } from './openapi/openapi.router.ts';
import { referencePage } from './openapi/reference-page.ts';
import { peopleRoutes } from './people/people.router.ts';
import { authenticate } from './session/authenticate.ts';
import { meRoutes } from './session/me.router.ts';
import { poolOf } from './session/pool.ts';
import { sessionRoutes } from './session/session.router.ts';
import { carriesCookie, sessionCookie, sessionMiddleware } from './session/session-cookie.ts';
import { SessionStore } from './session/session-store.ts';
import { signInWith } from './session/sign-in.ts';
import { tokenRoutes } from './tokens/tokens.router.ts';

/** Puts the server together from its parts; the tests build the same. Listening is `main.ts`'s. */
export function createApp(parts: Parts): Express {
  const { publicUrl, sessionSecret, trustProxy } = parts.settings;
  const app = express();
  app.disable('x-powered-by');
  app.set('trust proxy', trustProxy);
  app.set('query parser', 'simple');
  app.set('etag', false);

  app.use(requestLog(parts.log));
  app.use(...securityHeaders(publicUrl));
  app.use(compression());

  const store = new SessionStore(poolOf(parts.dataSource), parts.now);
  const signIn = signInWith(parts);
  const cookie = sessionCookie(publicUrl);
  /** Nobody need be signed in for these, so no session is read for them. */
  const open = [healthRoutes(parts), calculationRoutes(parts), clientErrorRoutes(parts), problemListRoutes(parts)];
  const resources = [
    sessionRoutes(parts, store, signIn),
    meRoutes(parts, signIn),
    peopleRoutes(parts),
    invitationRoutes(parts, signIn),
    tokenRoutes(parts),
    ...RESOURCES.map((factory) => factory(parts)),
  ];
  const openApi = openApiRoutes(parts, [...open, ...resources], cookie.name);

  const api = express.Router();
  api.use((_req, res, next) => {
    res.set('Cache-Control', 'no-store');
    next();
  });
  for (const { router } of [...open, openApi]) api.use(router);
  api.use(originCheck(ownOrigins(publicUrl), (header) => carriesCookie(cookie.name, header)));
  api.use(authenticate(parts, store, sessionMiddleware(publicUrl, sessionSecret, store)));
  for (const { router } of resources) api.use(router);
  api.use(methodCheck([...open, openApi, ...resources].flatMap(({ operations }) => operations)));
  app.use('/api/v1', api);
  app.use('/api/docs', referencePage());
  if (parts.keptMail) app.use('/dev/mail', keptMailPage(parts.keptMail));

  if (parts.clientFolder) app.use(clientFiles(parts.clientFolder));
  app.use(() => {
    throw new Problem('notFound');
  });
  app.use(problemHandler(parts));
  return app;
}
