import {
  chargeSheet,
  chargeSheetPage,
  createChargeSheetRequest,
} from '../../shared/charge-sheets/charge-sheet.schema.ts';
import { pageQuery } from '../../shared/lists/list.schema.ts';
import { type ApiRoutes, apiRoutes, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { madeOrFound, REPEATABLE } from '../registers/register-routes.ts';
import { createChargeSheet, getChargeSheet, listChargeSheets } from './charge-sheet.service.ts';

export function chargeSheetRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Charge sheets');
  routes.add(
    {
      method: 'get',
      path: '/units/{id}/charge-sheets',
      summary: 'Stored calculations of a unit, newest first',
      access: 'records:read',
      query: pageQuery,
      responses: { 200: chargeSheetPage },
    },
    async ({ actor, params, query }) => ok(await listChargeSheets(parts, actor, params.id, query)),
  );
  routes.add(
    {
      method: 'post',
      path: '/units/{id}/charge-sheets',
      summary: 'Stores a calculation with its inputs, result and versions',
      description: `The server works it out again from \`request\`; a sheet is never changed. ${REPEATABLE}`,
      access: 'charge-sheets:make',
      body: createChargeSheetRequest,
      responses: { 201: chargeSheet, 200: chargeSheet },
      problems: ['idReused'],
    },
    async ({ actor, params, body }) => madeOrFound(await createChargeSheet(parts, actor, params.id, body)),
  );
  routes.add(
    {
      method: 'get',
      path: '/charge-sheets/{id}',
      summary: 'One stored calculation',
      access: 'records:read',
      responses: { 200: chargeSheet },
    },
    async ({ actor, params }) => ok(await getChargeSheet(parts, actor, params.id)),
  );
  return routes;
}
