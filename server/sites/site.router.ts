import {
  createSiteRequest,
  site,
  siteListQuery,
  sitePage,
  updateSiteRequest,
} from '../../shared/sites/sites.schema.ts';
import { type ApiRoutes, apiRoutes } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { addRegister } from '../registers/register-routes.ts';
import { createSite, getSite, listSites, updateSite } from './site.service.ts';

export function siteRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Sites');
  addRegister(routes, {
    path: '/sites',
    words: { one: 'a site', many: 'Sites, by name' },
    write: 'sites:write',
    create: createSiteRequest,
    update: updateSiteRequest,
    view: site,
    query: siteListQuery,
    page: sitePage,
    list: (actor, query) => listSites(parts, actor, query),
    get: (actor, id) => getSite(parts, actor, id),
    make: (actor, request) => createSite(parts, actor, request),
    change: (actor, id, version, request) => updateSite(parts, actor, id, version, request),
  });
  return routes;
}
