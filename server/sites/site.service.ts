import type { EntityManager } from 'typeorm';
import type { z } from 'zod';
import type { createSiteRequest, Site, SiteListQuery, updateSiteRequest } from '../../shared/sites/sites.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem } from '../http/problem.ts';
import { changeRow, makeOnce, taken } from '../registers/register-rows.ts';
import { presentSite, type SiteRow, sitesRepository } from './site.repository.ts';

/** A home's name and address say where somebody lives. */
const PERSONAL = ['name', 'addressLines'];
const REFERENCES = { site_customer_fkey: '/customerId' };
const factsOf = ({ customerId, name, addressLines, timeZone, altitudeM, jurisdiction }: Omit<SiteRow, 'version'>) => ({
  customerId,
  name,
  addressLines,
  timeZone,
  altitudeM,
  jurisdiction,
});

export function listSites(parts: Parts, actor: Actor, query: SiteListQuery) {
  return inFirm(parts.dataSource, actor, (manager) => sitesRepository(manager).list(query));
}

export function getSite(parts: Parts, actor: Actor, id: string) {
  return inFirm(parts.dataSource, actor, (manager) => requireView(manager, id));
}

export function createSite(parts: Parts, actor: Actor, request: z.output<typeof createSiteRequest>) {
  const row = { firmId: actor.firmId, ...request };
  return makeOnce(
    parts,
    actor,
    { noun: 'site', subjectId: request.id, facts: factsOf(row), personal: PERSONAL },
    REFERENCES,
    (manager) => sitesRepository(manager).insert(row),
    (manager) => requireView(manager, request.id),
  );
}

export function updateSite(
  parts: Parts,
  actor: Actor,
  id: string,
  version: number,
  request: z.output<typeof updateSiteRequest>,
) {
  return changeRow<SiteRow, Site>(
    parts,
    actor,
    {
      noun: 'site',
      id,
      version,
      personal: PERSONAL,
      references: REFERENCES,
      find: (manager) => sitesRepository(manager).find(id),
      factsOf,
      changed: (row) => ({
        ...row,
        name: taken(request.name, row.name),
        addressLines: taken(request.addressLines, row.addressLines),
        timeZone: taken(request.timeZone, row.timeZone),
        altitudeM: taken(request.altitudeM, row.altitudeM),
        jurisdiction: taken(request.jurisdiction, row.jurisdiction),
      }),
      update: (manager, row) => sitesRepository(manager).update(row),
    },
    (manager) => requireView(manager, id),
  );
}

async function requireView(manager: EntityManager, id: string) {
  const found = await sitesRepository(manager).findView(id);
  if (!found) throw new Problem('notFound');
  return presentSite(found);
}
