import { cylinderStatement, statementQuery } from '../../shared/statements/cylinder-statement.schema.ts';
import { CSV_ANSWER } from '../books/csv-table.ts';
import { JOURNALLED, JOURNALLED_GET_PROBLEMS, refuseUnasked, sendJournalledCsv } from '../exports/send-csv.ts';
import { type ApiRoutes, apiRoutes, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { getStatement, statementCsv } from './cylinder-statement.service.ts';

export function statementRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Cylinders');
  routes.add(
    {
      method: 'get',
      path: '/cylinders/{id}/statement',
      summary: 'What a cylinder held, took in and gave out, against its scale readings',
      description:
        'By the time it happened, both days included. Each difference has its uncertainty by the very scales that were ' +
        'read, readings that two weighings share left out, and names who held the cylinder between the two readings.',
      access: 'records:read',
      query: statementQuery,
      responses: { 200: cylinderStatement },
    },
    async ({ actor, params, query }) => ok(await getStatement(parts, actor, params.id, query)),
  );
  routes.add(
    {
      method: 'get',
      path: '/cylinders/{id}/statement.csv',
      summary: 'The lines of a statement as CSV',
      access: 'records:read',
      description: JOURNALLED,
      query: statementQuery,
      responses: { 200: CSV_ANSWER },
      problems: JOURNALLED_GET_PROBLEMS,
    },
    async ({ req, actor, params, query, res }) => {
      refuseUnasked(req);
      const statement = await getStatement(parts, actor, params.id, query);
      const { from, to } = statement;
      await sendJournalledCsv(parts, actor, res, {
        document: 'cylinderStatement',
        filters: { cylinderId: params.id, from, to },
        fileName: `statement-${from}-${to}.csv`,
        text: statementCsv(statement, actor.locale),
      });
      return undefined;
    },
  );
  return routes;
}
