import { z } from 'zod';
import { type ApiRoutes, apiRoutes, ok } from './api-routes.ts';
import { databaseFits } from './database-fits.ts';
import type { Parts } from './parts.ts';
import { Problem } from './problem.ts';

const healthResponse = z.strictObject({ status: z.literal('ok'), version: z.string() });
const readyResponse = z.strictObject({ status: z.literal('ready') });

/** `/health`: the process answers. `/ready`: it can serve, which takes the database with this version's migrations. */
export function healthRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Service');
  let migrated = false;

  routes.add(
    {
      method: 'get',
      path: '/health',
      summary: 'Whether the process answers, and its version',
      access: 'public',
      responses: { 200: healthResponse },
    },
    () => ok({ status: 'ok', version: parts.version }),
  );

  routes.add(
    {
      method: 'get',
      path: '/ready',
      summary: 'Whether the service can serve: the database answers and is of this version',
      access: 'public',
      responses: { 200: readyResponse },
      problems: ['notReady'],
    },
    async () => {
      try {
        if (migrated) await parts.dataSource.query('SELECT 1');
        else migrated = await databaseFits(parts.dataSource); // never undone while this process runs
      } catch (error) {
        throw new Problem('notReady', { cause: error });
      }
      if (!migrated) throw new Problem('notReady');
      return ok({ status: 'ready' });
    },
  );
  return routes;
}
