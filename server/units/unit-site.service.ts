import type { EntityManager } from 'typeorm';
import type { z } from 'zod';
import type { PageQuery } from '../../shared/lists/list.schema.ts';
import type { addUnitSiteRequest, UnitSite } from '../../shared/unit-register/unit.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import { journalChange } from '../journal/register-journal.ts';
import { refuseFuture } from '../registers/refuse-future.ts';
import { type Made, makeOnce } from '../registers/register-rows.ts';
import { PERSONAL } from './make-units.ts';
import { unitsRepository } from './unit.repository.ts';
import type { UnitParts } from './unit.service.ts';
import { unitSiteRepository } from './unit-site.repository.ts';

const REFERENCES = { unit_site_site_fkey: '/siteId' };

/**
 * Another site from a moment on (a relocation); the unit itself shows the latest. No mass moves and nothing is judged
 * again: what was posted is read at the site where the unit stood then.
 * @throws Problem 422 where it stands there already
 */
export function addSite(
  parts: UnitParts,
  actor: Actor,
  unitId: string,
  request: z.output<typeof addUnitSiteRequest>,
): Promise<Made<UnitSite>> {
  refuseFuture(parts, request.validFrom);
  const { id, siteId } = request;
  const facts = { unitId, siteId, validFrom: new Date(request.validFrom) };
  return makeOnce(
    parts,
    actor,
    { noun: 'unitSite', subjectId: id, facts },
    REFERENCES,
    async (manager) => {
      await requireUnit(manager, unitId);
      const sites = unitSiteRepository(manager);
      const before = await sites.ofUnit(unitId);
      const stood = before.findLast(({ validFrom }) => validFrom <= facts.validFrom) ?? before[0];
      if (stood?.siteId === siteId) {
        throw problemOfRefusals([{ code: 'standsThereAlready', path: '/siteId', given: siteId }]);
      }
      await sites.insert({ firmId: actor.firmId, id, ...facts });
      await showLatest(parts, actor, manager, unitId);
    },
    async (manager) => {
      const made = await unitSiteRepository(manager).findView(id);
      if (!made) throw new Problem('notFound');
      return made;
    },
  );
}

export function listSites(parts: UnitParts, actor: Actor, unitId: string, page: PageQuery) {
  return inFirm(parts.dataSource, actor, async (manager) => {
    await requireUnit(manager, unitId);
    return unitSiteRepository(manager).list(unitId, page);
  });
}

async function requireUnit(manager: EntityManager, unitId: string) {
  const unit = await unitsRepository(manager).find(unitId);
  if (!unit) throw new Problem('notFound');
  return unit;
}

async function showLatest(parts: UnitParts, actor: Actor, manager: EntityManager, unitId: string): Promise<void> {
  const { firmId, id, version, ...before } = await requireUnit(manager, unitId);
  const siteId = (await unitSiteRepository(manager).ofUnit(unitId)).at(-1)?.siteId ?? before.siteId;
  if (siteId === before.siteId) return;
  const facts = { ...before, siteId };
  await unitsRepository(manager).update({ firmId, id, version, ...facts });
  await journalChange(
    { ...parts, personId: actor.personId },
    manager,
    { noun: 'unit', subjectId: id, facts, personal: PERSONAL },
    version + 1,
    before,
  );
}
