import type { EntityManager } from 'typeorm';
import type { EntryGroupRequest } from '../../shared/ledger/entry-group.schema.ts';
import { startOfDay } from '../../shared/periods/month.ts';
import { requireRefrigerant } from '../../shared/reference/require-row.ts';
import type { CreateUnitRequest } from '../../shared/unit-register/unit.schema.ts';
import { microgramsOfTyped } from '../../shared/units/mass.ts';
import type { PostingParts } from '../entries/post-group.ts';
import { postGroupsWithin } from '../entries/post-groups.ts';
import { findEarlierHashes } from '../entries/posting-answer.repository.ts';
import type { Actor } from '../http/actor.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import { requestHash } from '../journal/canonical-text.ts';
import { journalNewRows, type NewOrRefused, type RegisterRow, whichWereMade } from '../journal/register-journal.ts';
import { refusingReferences } from '../registers/register-rows.ts';
import { type UnitRow, unitsRepository } from './unit.repository.ts';
import { unitHistoryRepository } from './unit-history.repository.ts';

/** What people call a machine in somebody's home may name the person. */
export const PERSONAL = ['name'];
export const REFERENCES = { unit_site_fkey: '/siteId' };
export const factsOf = ({
  firmId: _firm,
  id: _id,
  version: _version,
  ...facts
}: Omit<UnitRow, 'version'> & { version?: number }) => facts;

interface UnitPlan {
  request: CreateUnitRequest;
  rows: ReturnType<typeof rowsOf>;
  /** The factory or opening entry. */
  initial: EntryGroupRequest | null;
}

/**
 * Makes units with what is known of them, each once however often it is asked for; their factory or opening entries are
 * posted with them. The head is locked already.
 * @returns of each whether it is new, or what refused it; a unit whose entry was refused is there without it
 * @throws Problem 422 where the database refuses; of several without saying which
 */
export async function makeUnits(
  manager: EntityManager,
  parts: PostingParts,
  actor: Actor,
  requests: readonly CreateUnitRequest[],
): Promise<NewOrRefused[]> {
  const zones = await unitHistoryRepository(manager).findSiteZones(requests.map(({ siteId }) => siteId));
  const planned = requests.map((request) => planOf(parts, actor.firmId, request, zones));
  const plans = planned.filter((plan): plan is UnitPlan => !(plan instanceof Problem));
  const made = await whichWereMadeAlike(manager, plans);
  const fresh = plans.filter((plan) => made.get(plan) === false);
  // One time for all records of a unit: by it a resend tells what was made with the unit from what came later.
  const at = parts.now();
  const atOnce = { ...parts, now: () => at };
  await insert(manager, fresh);
  const registers = fresh.flatMap(({ rows }) => rows.registers);
  if (registers.length > 0) await journalNewRows({ ...atOnce, personId: actor.personId }, manager, registers);
  const opened = fresh.filter(({ initial }) => initial !== null);
  const posted = await postGroupsWithin(
    manager,
    atOnce,
    actor,
    opened.map(({ initial }) => initial as EntryGroupRequest),
  );
  const refusalOf = new Map(opened.map((plan, index) => [plan, posted[index]]));
  return planned.map((plan): NewOrRefused => {
    if (plan instanceof Problem) return plan;
    const wasMade = made.get(plan) ?? false;
    if (wasMade !== false) return wasMade === true ? false : wasMade;
    const refusal = refusalOf.get(plan);
    return refusal instanceof Problem ? inUnit(refusal) : true;
  });
}

async function insert(manager: EntityManager, plans: readonly UnitPlan[]): Promise<void> {
  const history = unitHistoryRepository(manager);
  await refusingReferences(REFERENCES, () => unitsRepository(manager).insert(...plans.map(({ rows }) => rows.unit)));
  await history.addRefrigerant(...plans.map(({ rows }) => rows.refrigerant));
  await history.addSite(...plans.map(({ rows }) => rows.site));
  await history.addFullCharge(...plans.flatMap(({ rows }) => rows.fullCharge ?? []));
}

function planOf(
  parts: PostingParts,
  firmId: string,
  request: CreateUnitRequest,
  zones: ReadonlyMap<string, string>,
): UnitPlan | Problem {
  const known = requireRefrigerant(parts.reference, request.refrigerant);
  if (!known.ok) return problemOfRefusals(known.refusals);
  const zone = zones.get(request.siteId);
  if (zone === undefined) return problemOfRefusals([{ code: 'notKnownHere', path: '/siteId', given: request.siteId }]);
  const rows = rowsOf(request, firmId, new Date(startOfDay(request.refrigerantFrom, zone)));
  return { request, rows, initial: initialGroup(request) };
}

/** A problem where the unit was made, but otherwise or with another full charge or initial charge beside it. */
async function whichWereMadeAlike(
  manager: EntityManager,
  plans: readonly UnitPlan[],
): Promise<Map<UnitPlan, boolean | Problem>> {
  const rows = await whichWereMade(
    manager,
    plans.flatMap((plan) => plan.rows.registers),
  );
  const made = plans.filter((plan) => rows.get(plan.rows.registers[0]) === true);
  const madeWith = await unitsRepository(manager).findMadeWith(made.map(({ request }) => request.id));
  const hashes = await findEarlierHashes(
    manager,
    made.flatMap(({ initial }) => initial?.groupId ?? []),
  );
  return new Map(
    plans.map((plan): [UnitPlan, boolean | Problem] => {
      const { request, initial } = plan;
      const [unit, ...beside] = plan.rows.registers;
      const first = rows.get(unit) ?? false;
      if (first !== true) return [plan, first];
      const asked = {
        fullChargeIds: request.fullCharge ? [request.fullCharge.id] : [],
        groupIds: initial ? [initial.groupId] : [],
      };
      const isAlike =
        beside.every((row) => rows.get(row) === true) &&
        JSON.stringify(madeWith.get(request.id)) === JSON.stringify(asked) &&
        (initial === null || hashes.get(initial.groupId) === requestHash(initial));
      return [plan, isAlike || new Problem('idReused')];
    }),
  );
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
  const registers: [RegisterRow, ...RegisterRow[]] = [
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

/** Refusals of the initial posting point into the request that asked for it. */
function inUnit(problem: Problem): Problem {
  if (problem.errors.length === 0) return problem;
  return problemOfRefusals(problem.errors.map((refusal) => ({ ...refusal, path: pathInUnit(refusal.path) })));
}

function pathInUnit(path: string): string {
  if (path.startsWith('/occurredAt')) return '/initialCharge/at';
  return path.includes('/mass') ? `/initialCharge${path.slice(path.indexOf('/mass'))}` : '/initialCharge';
}
