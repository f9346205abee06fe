import type { EntityManager } from 'typeorm';
import type { z } from 'zod';
import { co2e } from '../../shared/co2e/co2e.ts';
import type {
  CreateUnitRequest,
  Unit,
  UnitListQuery,
  updateUnitRequest,
} from '../../shared/unit-register/unit.schema.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { PostingParts } from '../entries/post-group.ts';
import type { Actor } from '../http/actor.ts';
import { Problem } from '../http/problem.ts';
import { lockHead } from '../journal/post-records.ts';
import { orThrow } from '../journal/register-journal.ts';
import { changeRow, type Made, taken } from '../registers/register-rows.ts';
import { factsOf, makeUnits, PERSONAL, REFERENCES } from './make-units.ts';
import { presentFullCharge, type UnitRow, type UnitViewRow, unitsRepository } from './unit.repository.ts';

export type UnitParts = PostingParts;

export function listUnits(parts: UnitParts, actor: Actor, query: UnitListQuery) {
  return inFirm(parts.dataSource, actor, (manager) =>
    unitsRepository(manager).list(query, (row) => presentUnit(parts, row)),
  );
}

export function getUnit(parts: UnitParts, actor: Actor, id: string) {
  return inFirm(parts.dataSource, actor, (manager) => requireView(parts, manager, id));
}

/** A unit with what is known of it; its factory or opening entry is posted in the same transaction. */
export function createUnit(parts: UnitParts, actor: Actor, request: CreateUnitRequest): Promise<Made<Unit>> {
  return inFirm(parts.dataSource, actor, async (manager) => {
    await lockHead(manager);
    const [made] = await makeUnits(manager, parts, actor, [request]);
    return { isNew: orThrow(made), value: await requireView(parts, manager, request.id) };
  });
}

export function updateUnit(
  parts: UnitParts,
  actor: Actor,
  id: string,
  version: number,
  request: z.output<typeof updateUnitRequest>,
) {
  return changeRow<UnitRow, Unit>(
    parts,
    actor,
    {
      noun: 'unit',
      id,
      version,
      personal: PERSONAL,
      references: REFERENCES,
      find: (manager) => unitsRepository(manager).find(id),
      factsOf,
      changed: (row) => ({
        ...row,
        tag: taken(request.tag, row.tag),
        name: taken(request.name, row.name),
        subsector: taken(request.subsector, row.subsector),
        serials: taken(request.serials, row.serials),
        nameplateReadable: taken(request.nameplateReadable, row.nameplateReadable),
        designPressureHighKPaGauge: taken(request.designPressureHighKPaGauge, row.designPressureHighKPaGauge),
        designPressureLowKPaGauge: taken(request.designPressureLowKPaGauge, row.designPressureLowKPaGauge),
        installedOn: taken(request.installedOn, row.installedOn),
      }),
      update: (manager, row) => unitsRepository(manager).update(row),
    },
    (manager) => requireView(parts, manager, id),
  );
}

async function requireView(parts: UnitParts, manager: EntityManager, id: string): Promise<Unit> {
  const found = await unitsRepository(manager).findView(id);
  if (!found) throw new Problem('notFound');
  return presentUnit(parts, found);
}

function presentUnit({ reference }: Pick<UnitParts, 'reference'>, row: UnitViewRow): Unit {
  const { known, book, gwpSet, fullCharge: stored, ...facts } = row;
  const byRefrigerant = Object.entries(book ?? {})
    .map(([refrigerant, mass]) => ({ refrigerant, massG: gramsOfMicrograms(BigInt(mass)) }))
    .sort((a, b) => (a.refrigerant < b.refrigerant ? -1 : 1));
  const massG = gramsOfMicrograms(Object.values(book ?? {}).reduce((sum, mass) => sum + BigInt(mass), 0n));
  const fullCharge = stored ? presentFullCharge(stored) : null;
  const weighed = fullCharge?.massG ?? (known && massG > 0 ? massG : null);
  const equivalent =
    weighed === null ? null : co2e({ refrigerant: row.refrigerant, massG: weighed, gwpSet }, reference);
  return {
    id: facts.id,
    siteId: facts.siteId,
    siteName: facts.siteName,
    customerId: facts.customerId,
    customerName: facts.customerName,
    tag: facts.tag,
    name: facts.name,
    applianceKind: facts.applianceKind,
    subsector: facts.subsector,
    refrigerant: facts.refrigerant,
    serials: facts.serials,
    nameplateReadable: facts.nameplateReadable,
    designPressureHighKPaGauge: facts.designPressureHighKPaGauge,
    designPressureLowKPaGauge: facts.designPressureLowKPaGauge,
    installedOn: facts.installedOn,
    fullCharge,
    book: { known, massG, byRefrigerant },
    co2eT: equivalent?.ok ? equivalent.value.co2eT : null,
    version: facts.version,
  };
}
