import { rateLimit } from 'express-rate-limit';
import { z } from 'zod';
import { type ApiRoutes, apiRoutes, noContent } from './api-routes.ts';
import type { Parts } from './parts.ts';
import { Problem } from './problem.ts';

const clientErrorRequest = z.strictObject({
  message: z.string().max(1000),
  stack: z.string().max(8000).optional(),
  /** The route it happened on, without its query. */
  where: z.string().max(300),
});

const REPORTS_PER_MINUTE = 30;

/** An error in somebody's browser reaches our log with the request's id, signed in or not. It is a stranger's text. */
export function clientErrorRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Service');
  const limit = rateLimit({
    windowMs: 60_000,
    limit: REPORTS_PER_MINUTE,
    standardHeaders: 'draft-8',
    legacyHeaders: false,
    identifier: 'client-errors',
    handler: (_req, _res, next) => next(new Problem('tooManyRequests')),
  });
  routes.add(
    {
      method: 'post',
      path: '/client-errors',
      summary: 'Report an error that happened in a browser',
      access: 'public',
      body: clientErrorRequest,
      responses: { 204: null },
      problems: ['tooManyRequests'],
      bodyLimit: 16 * 1024,
      before: [limit],
    },
    ({ req, body }) => {
      req.log.warn({ clientError: body }, 'an error in a browser');
      return noContent();
    },
  );
  return routes;
}
