import {
  addTareRequest,
  createCylinderRequest,
  cylinder,
  cylinderListQuery,
  cylinderPage,
  updateCylinderRequest,
} from '../../shared/cylinders/cylinder.schema.ts';
import { entryGroupResponse } from '../../shared/ledger/entry-group-response.schema.ts';
import { type ApiRoutes, apiRoutes } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { addRegister, madeOrFound, REPEATABLE } from '../registers/register-routes.ts';
import { addTare, createCylinder, getCylinder, listCylinders, updateCylinder } from './cylinder.service.ts';

export function cylinderRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Cylinders');
  addRegister(routes, {
    path: '/cylinders',
    words: { one: 'a cylinder, with its tare', many: 'Cylinders, by tag' },
    write: 'cylinders:write',
    create: createCylinderRequest,
    update: updateCylinderRequest,
    view: cylinder,
    query: cylinderListQuery,
    page: cylinderPage,
    list: (actor, query) => listCylinders(parts, actor, query),
    get: (actor, id) => getCylinder(parts, actor, id),
    make: (actor, request) => createCylinder(parts, actor, request),
    change: (actor, id, version, request) => updateCylinder(parts, actor, id, version, request),
  });
  routes.add(
    {
      method: 'post',
      path: '/cylinders/{id}/tares',
      summary: 'A revised tare, from a day on',
      description: `${REPEATABLE} What the cylinder's readings say is judged again by it; the answer holds what that added.`,
      access: 'cylinders:write',
      body: addTareRequest,
      responses: { 201: entryGroupResponse, 200: entryGroupResponse },
      problems: ['idReused'],
    },
    async ({ actor, params, body }) => madeOrFound(await addTare(parts, actor, params.id, body)),
  );
  return routes;
}
