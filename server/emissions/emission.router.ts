import { emissionsQuery, emissionsResponse } from '../../shared/books/emissions.schema.ts';
import { CSV_ANSWER } from '../books/csv-table.ts';
import { JOURNALLED, JOURNALLED_GET_PROBLEMS, refuseUnasked, sendJournalledCsv } from '../exports/send-csv.ts';
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
    {
      ...reads,
      path: '/emissions.csv',
      summary: 'Emissions as CSV',
      description: JOURNALLED,
      responses: { 200: CSV_ANSWER },
      problems: JOURNALLED_GET_PROBLEMS,
    },
    async ({ req, actor, query, res }) => {
      refuseUnasked(req);
      const text = emissionsCsv(await getEmissions(parts, actor, query), actor.locale);
      const fileName = `emissions-by-${query.by}.csv`;
      await sendJournalledCsv(parts, actor, res, { document: 'emissions', filters: query, fileName, text });
      return undefined;
    },
  );
  return routes;
}
