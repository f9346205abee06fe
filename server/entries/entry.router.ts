import {
  countedAdditionsResponse,
  entryExportQuery,
  entryListQuery,
  entryPage,
  groupView,
  onHand,
  readingListQuery,
  readingPage,
} from '../../shared/entries/entry.schema.ts';
import { JOURNALLED, JOURNALLED_GET_PROBLEMS, refuseUnasked } from '../exports/send-csv.ts';
import { type ApiRoutes, apiRoutes, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { exportEntries, getCountedAdditions, getGroup, getOnHand, listEntries, listReadings } from './entry.service.ts';

export function entryRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Log');
  const reads = { method: 'get', access: 'records:read' } as const;
  routes.add(
    {
      ...reads,
      path: '/entry-groups/{id}',
      summary: 'A whole group: entries, readings, statements, documents, who and why, its hash',
      responses: { 200: groupView },
    },
    async ({ actor, params }) => ok(await getGroup(parts, actor, params.id)),
  );
  routes.add(
    { ...reads, path: '/entries', summary: 'The log', query: entryListQuery, responses: { 200: entryPage } },
    async ({ actor, query }) => ok(await listEntries(parts, actor, query)),
  );
  routes.add(
    {
      ...reads,
      path: '/entries.csv',
      summary: 'The log as CSV, as filtered',
      description:
        'Masses in grams, times in UTC. Cells that a spreadsheet would run as a formula begin with an apostrophe. ' +
        `Managers take out everything, readers what they see, technicians their own (personId). ${JOURNALLED}`,
      query: entryExportQuery,
      responses: { 200: { mediaType: 'text/csv', description: 'One line an entry, with a head line' } },
      problems: JOURNALLED_GET_PROBLEMS,
    },
    async ({ req, actor, query, res }) => {
      refuseUnasked(req);
      await exportEntries(parts, actor, query, res);
      return undefined;
    },
  );
  routes.add(
    {
      ...reads,
      path: '/readings',
      summary: 'Scale readings of a cylinder',
      query: readingListQuery,
      responses: { 200: readingPage },
    },
    async ({ actor, query }) => ok(await listReadings(parts, actor, query)),
  );
  routes.add(
    {
      ...reads,
      path: '/units/{id}/counted-additions',
      summary: 'Additions as the leak rate counts them',
      responses: { 200: countedAdditionsResponse },
    },
    async ({ actor, params }) => ok(await getCountedAdditions(parts, actor, params.id)),
  );
  routes.add(
    { ...reads, path: '/on-hand', summary: 'What is in cylinders', responses: { 200: onHand } },
    async ({ actor }) => ok(await getOnHand(parts, actor)),
  );
  return routes;
}
