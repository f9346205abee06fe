import {
  createPartyRequest,
  party,
  partyListQuery,
  partyPage,
  updatePartyRequest,
} from '../../shared/parties/parties.schema.ts';
import { type ApiRoutes, apiRoutes } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { addRegister } from '../registers/register-routes.ts';
import { createParty, getParty, listParties, updateParty } from './party.service.ts';

export function partyRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Parties');
  addRegister(routes, {
    path: '/parties',
    words: {
      one: 'a supplier, reclaimer or other contractor',
      many: 'Suppliers, reclaimers and other contractors, by name',
    },
    write: 'parties:write',
    create: createPartyRequest,
    update: updatePartyRequest,
    view: party,
    query: partyListQuery,
    page: partyPage,
    list: (actor, query) => listParties(parts, actor, query),
    get: (actor, id) => getParty(parts, actor, id),
    make: (actor, request) => createParty(parts, actor, request),
    change: (actor, id, version, request) => updateParty(parts, actor, id, version, request),
  });
  return routes;
}
