import {
  addChargeBasisRequest,
  chargeBasisPage,
  storedChargeBasis,
} from '../../shared/charge-sheets/charge-sheet.schema.ts';
import { entryGroupResponse } from '../../shared/ledger/entry-group-response.schema.ts';
import { pageQuery } from '../../shared/lists/list.schema.ts';
import {
  addFullChargeRequest,
  addLineSetRequest,
  addUnitRefrigerantRequest,
  addUnitSiteRequest,
  createUnitRequest,
  fullChargePage,
  lineSet,
  lineSetPage,
  unit,
  unitListQuery,
  unitPage,
  unitSite,
  unitSitePage,
  updateUnitRequest,
} from '../../shared/unit-register/unit.schema.ts';
import { type ApiRoutes, apiRoutes, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { addRegister, madeOrFound, REPEATABLE } from '../registers/register-routes.ts';
import { createUnit, getUnit, listUnits, updateUnit } from './unit.service.ts';
import {
  addChargeBasis,
  addFullCharge,
  addLineSet,
  addRefrigerant,
  listChargeBases,
  listFullCharges,
  listLineSets,
} from './unit-history.service.ts';
import { addSite, listSites } from './unit-site.service.ts';

const JUDGED_AGAIN = `${REPEATABLE} What the unit's entries say is judged again by it; the answer holds what that added.`;

export function unitRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Units');
  addRegister(routes, {
    path: '/units',
    words: { one: 'a unit, with its factory or opening entry', many: 'Units, by tag or name' },
    write: 'units:write',
    create: createUnitRequest,
    update: updateUnitRequest,
    view: unit,
    query: unitListQuery,
    page: unitPage,
    list: (actor, query) => listUnits(parts, actor, query),
    get: (actor, id) => getUnit(parts, actor, id),
    make: (actor, request) => createUnit(parts, actor, request),
    change: (actor, id, version, request) => updateUnit(parts, actor, id, version, request),
  });

  const reads = { method: 'get', access: 'records:read', query: pageQuery } as const;
  const adds = { method: 'post', access: 'units:write', description: REPEATABLE, problems: ['idReused'] } as const;
  routes.add(
    {
      ...reads,
      path: '/units/{id}/full-charges',
      summary: 'Full charges as determined, newest first',
      responses: { 200: fullChargePage },
    },
    async ({ actor, params, query }) => ok(await listFullCharges(parts, actor, params.id, query)),
  );
  routes.add(
    {
      ...adds,
      path: '/units/{id}/full-charges',
      summary: 'A full charge that was determined',
      description: JUDGED_AGAIN,
      body: addFullChargeRequest,
      responses: { 201: entryGroupResponse, 200: entryGroupResponse },
    },
    async ({ actor, params, body }) => madeOrFound(await addFullCharge(parts, actor, params.id, body)),
  );
  routes.add(
    {
      ...adds,
      path: '/units/{id}/refrigerants',
      summary: 'Another refrigerant from a day on',
      description: JUDGED_AGAIN,
      body: addUnitRefrigerantRequest,
      responses: { 201: entryGroupResponse, 200: entryGroupResponse },
    },
    async ({ actor, params, body }) => madeOrFound(await addRefrigerant(parts, actor, params.id, body)),
  );
  routes.add(
    {
      ...reads,
      path: '/units/{id}/sites',
      summary: 'Where the unit stood from when, newest first',
      responses: { 200: unitSitePage },
    },
    async ({ actor, params, query }) => ok(await listSites(parts, actor, params.id, query)),
  );
  routes.add(
    {
      ...adds,
      path: '/units/{id}/sites',
      summary: 'Another site from a moment on: the unit was moved',
      description: `${REPEATABLE} What was posted is read at the site where the unit stood at that time.`,
      body: addUnitSiteRequest,
      responses: { 201: unitSite, 200: unitSite },
    },
    async ({ actor, params, body }) => madeOrFound(await addSite(parts, actor, params.id, body)),
  );
  routes.add(
    {
      ...reads,
      path: '/units/{id}/line-sets',
      summary: 'Line sets as installed, newest first',
      responses: { 200: lineSetPage },
    },
    async ({ actor, params, query }) => ok(await listLineSets(parts, actor, params.id, query)),
  );
  routes.add(
    {
      ...adds,
      path: '/units/{id}/line-sets',
      summary: 'A line set from a day on; earlier ones stay',
      body: addLineSetRequest,
      responses: { 201: lineSet, 200: lineSet },
    },
    async ({ actor, params, body }) => madeOrFound(await addLineSet(parts, actor, params.id, body)),
  );
  routes.add(
    {
      ...reads,
      path: '/units/{id}/charge-bases',
      summary: 'What the manual says about charging this unit, newest first',
      responses: { 200: chargeBasisPage },
    },
    async ({ actor, params, query }) => ok(await listChargeBases(parts, actor, params.id, query)),
  );
  routes.add(
    {
      ...adds,
      path: '/units/{id}/charge-bases',
      summary: 'What the manual says, from a day on; earlier ones stay',
      body: addChargeBasisRequest,
      responses: { 201: storedChargeBasis, 200: storedChargeBasis },
    },
    async ({ actor, params, body }) => madeOrFound(await addChargeBasis(parts, actor, params.id, body)),
  );
  return routes;
}
