import { type ApiRoutes, apiRoutes } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { openApiDocument } from './openapi-document.ts';

/** The document describes every resource and itself; it is made when first asked for, and then kept. */
export function openApiRoutes(parts: Parts, others: readonly ApiRoutes[], cookieName: string): ApiRoutes {
  const routes = apiRoutes(parts, 'Service');
  let document: unknown = null;
  routes.add(
    {
      method: 'get',
      path: '/openapi.json',
      summary: 'This description, OpenAPI 3.1',
      access: 'public',
      responses: { 200: { mediaType: 'application/json', description: 'An OpenAPI 3.1 document' } },
    },
    ({ res }) => {
      document ??= openApiDocument([...others, routes], {
        version: parts.version,
        publicUrl: parts.settings.publicUrl,
        cookieName,
      });
      res.json(document);
      return undefined;
    },
  );
  return routes;
}
