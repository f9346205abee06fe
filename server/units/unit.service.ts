import { TZDate } from '@date-fns/tz';
import type { EntityManager } from 'typeorm';
import type { z } from 'zod';
import { co2e } from '../../shared/co2e/co2e.ts';
import type { EntryGroupRequest } from '../../shared/ledger/entry-group.schema.ts';
import type {
  CreateUnitRequest,
  Unit,
  UnitListQuery,
  updateUnitRequest,
} from '../../shared/unit-register/unit.schema.ts';
import { gramsOfMicrograms, microgramsOfTyped } from '../../shared/units/mass.ts';
import { inFirm } from '../database/firm-scope.ts';
import { postWithin } from '../entries/entry-group.service.ts';
import { findRepeated, type PostingParts } from '../entries/post-group.ts';
import type { Actor } from '../http/actor.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import { requestHash } from '../journal/canonical-text.ts';
import { lockHead } from '../journal/post-records.ts';
import { journalNewRows, type RegisterRow, wasMade } from '../journal/register-journal.ts';
import { changeRow, type Made, refusingReferences, taken } from '../registers/register-rows.ts';
import { presentFullCharge, type UnitRow, type UnitViewRow, unitsRepository } from './unit.repository.ts';
import { unitHistoryRepository } from './unit-history.repository.ts';

export type UnitParts = PostingParts;

/** What people call a machine in somebody's home may name the person. */
const PERSONAL = ['name'];
const REFERENCES = { unit_site_fkey: '/siteId' };
const factsOf = ({
  firmId: _firm,
  id: _id,
  version: _version,
  ...facts
}: Omit<UnitRow, 'version'> & { version?: number }) => facts;

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
  refuseRefrigerant(parts, request.refrigerant, '/refrigerant');
  return inFirm(parts.dataSource, actor, async (manager) => {
    await lockHead(manager);
    const zone = await unitHistoryRepository(manager).findSiteZone(request.siteId);
    if (zone === null) throw problemOfRefusals([{ code: 'notKnownHere', path: '/siteId', given: request.siteId }]);
    const rows = rowsOf(request, actor.firmId, startOfDay(request.refrigerantFrom, zone));
    const posting = initialGroup(request);
    const isNew = !(await wasMadeAlike(manager, rows.registers, posting, request));
    if (isNew) {
      const history = unitHistoryRepository(manager);
      await refusingReferences(REFERENCES, () => unitsRepository(manager).insert(rows.unit));
      await history.addRefrigerant(rows.refrigerant);
      await history.addSite(rows.site);
      if (rows.fullCharge) await history.addFullCharge(rows.fullCharge);
      await journalNewRows({ ...parts, personId: actor.personId }, manager, rows.registers);
      if (posting) await postInitial(manager, parts, actor, posting);
    }
    return { isNew, value: await requireView(parts, manager, request.id) };
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

export function refuseRefrigerant({ reference }: Pick<UnitParts, 'reference'>, refrigerant: string, path: string) {
  if (reference.findRefrigerant(refrigerant)) return;
  throw problemOfRefusals([{ code: 'unknownRefrigerant', path, given: refrigerant, params: { given: refrigerant } }]);
}

/** Midnight at the site, where the day begins. */
function startOfDay(day: string, timeZone: string): Date {
  const [year = 0, month = 1, date = 1] = day.split('-').map(Number);
  return new Date(new TZDate(year, month - 1, date, timeZone).getTime());
}

function rowsOf(request: CreateUnitRequest, firmId: string, since: Date) {
  const { id, siteId, refrigerant, fullCharge } = request;
  const unit = {
    firmId,
    id,
    siteId,
    tag: request.tag,
    name: request.name,
    applianceKind: request.applianceKind,
    subsector: request.subsector ?? null,
    refrigerant,
    serials: request.serials,
    nameplateReadable: request.nameplateReadable,
    designPressureHighKPaGauge: request.designPressureHighKPaGauge ?? null,
    designPressureLowKPaGauge: request.designPressureLowKPaGauge ?? null,
    installedOn: request.installedOn ?? null,
  };
  // The first refrigerant and site belong to the unit itself and have its id.
  const dated = { firmId, id, unitId: id, validFrom: since };
  const refrigerantRow = { ...dated, refrigerant, jobId: null };
  const siteRow = { ...dated, siteId };
  const fullChargeRow = fullCharge
    ? {
        firmId,
        id: fullCharge.id,
        unitId: id,
        refrigerant,
        massMicrograms: microgramsOfTyped(fullCharge.mass) as bigint,
        typedValue: fullCharge.mass.value,
        typedUnit: fullCharge.mass.unit,
        method: fullCharge.method,
        validFrom: new Date(fullCharge.validFrom),
        jobId: null,
        reason: null,
      }
    : null;
  const registers: RegisterRow[] = [
    { noun: 'unit', subjectId: id, facts: factsOf(unit), personal: PERSONAL },
    { noun: 'unitRefrigerant', subjectId: id, facts: datedFacts(refrigerantRow) },
    { noun: 'unitSite', subjectId: id, facts: datedFacts(siteRow) },
    ...(fullChargeRow
      ? [{ noun: 'unitFullCharge' as const, subjectId: fullChargeRow.id, facts: datedFacts(fullChargeRow) }]
      : []),
  ];
  return { unit, refrigerant: refrigerantRow, site: siteRow, fullCharge: fullChargeRow, registers };
}

/** Everything of a dated row but its keys. */
export function datedFacts<T extends { firmId: string; id: string }>({ firmId: _firm, id: _id, ...facts }: T) {
  return facts as Record<string, unknown>;
}

function initialGroup({ id, refrigerant, initialCharge }: CreateUnitRequest): EntryGroupRequest | null {
  if (initialCharge.state === 'notKnown') return null;
  const { state, mass, at, entryId, groupId } = initialCharge;
  return {
    groupId,
    schema: 1,
    kind: state === 'factory' ? 'factoryCharge' : 'opening',
    unitId: id,
    occurredAt: at,
    entries: [
      {
        id: entryId,
        refrigerant,
        mass,
        from: { place: state },
        to: { place: 'unit', id },
        howKnown: state === 'factory' ? 'factory' : 'estimated',
      },
    ],
  };
}

/** @throws Problem 409 when the unit was made, but with another full charge or initial charge beside it */
async function wasMadeAlike(
  manager: EntityManager,
  registers: readonly RegisterRow[],
  posting: EntryGroupRequest | null,
  request: CreateUnitRequest,
): Promise<boolean> {
  const [unit, ...beside] = registers;
  if (!unit || !(await wasMade(manager, unit))) return false;
  for (const row of beside) if (!(await wasMade(manager, row))) throw new Problem('idReused');
  const made = await unitsRepository(manager).findMadeWith(request.id);
  const asked = {
    fullChargeIds: request.fullCharge ? [request.fullCharge.id] : [],
    groupIds: posting ? [posting.groupId] : [],
  };
  if (JSON.stringify(made) !== JSON.stringify(asked)) throw new Problem('idReused');
  if (posting) await findRepeated(manager, posting.groupId, requestHash(posting));
  return true;
}

/** Refusals of the initial posting point into the request that asked for it. */
async function postInitial(manager: EntityManager, parts: UnitParts, actor: Actor, group: EntryGroupRequest) {
  try {
    await postWithin(manager, parts, actor, group);
  } catch (error) {
    if (!(error instanceof Problem) || error.errors.length === 0) throw error;
    throw problemOfRefusals(error.errors.map((refusal) => ({ ...refusal, path: pathInUnit(refusal.path) })));
  }
}

function pathInUnit(path: string): string {
  if (path.startsWith('/occurredAt')) return '/initialCharge/at';
  return path.includes('/mass') ? `/initialCharge${path.slice(path.indexOf('/mass'))}` : '/initialCharge';
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
