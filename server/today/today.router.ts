import { todayResponse } from '../../shared/today/today.schema.ts';
import { type ApiRoutes, apiRoutes, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { getToday } from './today.service.ts';

export function todayRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Today');
  routes.add(
    {
      method: 'get',
      path: '/today',
      summary: "The day: a technician's van and open weigh-ins; for the office what came in and what contradicts",
      access: 'records:read',
      responses: { 200: todayResponse },
    },
    async ({ actor }) => ok(await getToday(parts, actor)),
  );
  return routes;
}
