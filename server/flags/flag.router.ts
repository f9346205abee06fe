import { flagListQuery, flagPage } from '../../shared/entries/entry.schema.ts';
import { type ApiRoutes, apiRoutes, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { listFlags } from './flag.service.ts';

export function flagRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Flags');
  routes.add(
    {
      method: 'get',
      path: '/flags',
      summary: 'What stands before the manager: books and words that contradict, what is owed, dangers',
      description:
        'A flag whose figure changes is closed and opened anew; `openedAt` stays the time since which it has stood.',
      access: 'records:read',
      query: flagListQuery,
      responses: { 200: flagPage },
    },
    async ({ actor, query }) => ok(await listFlags(parts, actor, query)),
  );
  return routes;
}
