import { emissionsQuery, emissionsResponse } from '../../shared/books/emissions.schema.ts';
import { CSV_ANSWER, sendCsv } from '../books/csv-table.ts';
import { type ApiRoutes, apiRoutes, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { emissionsCsv, getEmissions } from './emission.service.ts';

export function emissionRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Emissions');
  const reads = { method: 'get', access: 'records:read', query: emissionsQuery } as const;
  routes.add(
    {
      ...reads,
      path: '/emissions',
      summary: 'What went to the atmosphere, by booking month, refrigerant, customer or site, in g and t CO2e',
      description:
        'A query over the log. A loss that is taken back is negative in the month of the taking back; a difference is ' +
        'no emission until month close says so; what was lost before our care stands apart.',
      responses: { 200: emissionsResponse },
    },
    async ({ actor, query }) => ok(await getEmissions(parts, actor, query)),
  );
  routes.add(
    { ...reads, path: '/emissions.csv', summary: 'Emissions as CSV', responses: { 200: CSV_ANSWER } },
    async ({ actor, query, res }) => {
      const emissions = await getEmissions(parts, actor, query);
      sendCsv(res, `emissions-by-${query.by}.csv`, emissionsCsv(emissions));
      return undefined;
    },
  );
  return routes;
}
