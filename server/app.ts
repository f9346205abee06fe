import compression from 'compression';
import express, { type Express } from 'express';
import { RESOURCES } from './api.ts';
import { clientFiles } from './http/client-files.ts';
import { healthRoutes } from './http/health.ts';
import { methodCheck } from './http/method-check.ts';
import type { Parts } from './http/parts.ts';
import { Problem } from './http/problem.ts';
import { problemHandler } from './http/problem-handler.ts';
import { requestLog } from './http/request-log.ts';
import { securityHeaders } from './http/security-headers.ts';
import { openApiRoutes } from './openapi/openapi.router.ts';
import { referencePage } from './openapi/reference-page.ts';

/** Puts the server together from its parts; the tests build the same. Listening is `main.ts`'s. */
export function createApp(parts: Parts): Express {
  const app = express();
  app.disable('x-powered-by');
  app.set('trust proxy', parts.settings.trustProxy);
  app.set('query parser', 'simple');
  app.set('etag', false);

  app.use(requestLog(parts.log));
  app.use(...securityHeaders(parts.settings.publicUrl));
  app.use(compression());

  const health = healthRoutes(parts);
  const resources = RESOURCES.map((factory) => factory(parts));
  const described = [health, ...resources];
  const openApi = openApiRoutes(parts, described);

  app.use('/api', (_req, res, next) => {
    res.set('Cache-Control', 'no-store');
    next();
  });
  app.use('/api/v1', health.router, openApi.router);
  for (const { router } of resources) app.use('/api/v1', router);
  app.use('/api/v1', methodCheck([...described, openApi].flatMap(({ operations }) => operations)));
  app.use('/api/docs', referencePage());

  if (parts.clientFolder) app.use(clientFiles(parts.clientFolder));
  app.use(() => {
    throw new Problem('notFound');
  });
  app.use(problemHandler(parts));
  return app;
}
