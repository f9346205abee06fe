import type { EntityManager } from 'typeorm';
import { cylinderLimit } from '../../shared/cylinder-fill/cylinder-limits.ts';
import type { CreateCylinderRequest } from '../../shared/cylinders/cylinder.schema.ts';
import { requireRefrigerant } from '../../shared/reference/require-row.ts';
import { microgramsOfTyped, type TypedMass } from '../../shared/units/mass.ts';
import type { PostingParts } from '../entries/post-group.ts';
import type { Actor } from '../http/actor.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import { journalNewRows, type NewOrRefused, type RegisterRow, whichWereMade } from '../journal/register-journal.ts';
import { refusingReferences } from '../registers/register-rows.ts';
import { type CylinderRow, type CylinderTareRow, cylindersRepository } from './cylinder.repository.ts';

export const REFERENCES = {
  cylinder_owner_party_fkey: '/owner/id',
  cylinder_owner_customer_fkey: '/owner/id',
  cylinder_held_by_fkey: '/heldBy',
};
export type NewRow = Omit<CylinderRow, 'version'>;
export const factsOf = ({ firmId: _firm, id: _id, version: _version, ...facts }: NewRow & { version?: number }) =>
  facts;

interface CylinderPlan {
  row: NewRow;
  tare: CylinderTareRow;
  registers: [RegisterRow, RegisterRow];
}

/**
 * Makes cylinders with their tares, each once however often it is asked for. The head is locked already.
 * @returns of each whether it is new, or what refused it
 * @throws Problem 422 for a reference to nothing; of several without saying of which
 */
export async function makeCylinders(
  manager: EntityManager,
  parts: PostingParts,
  actor: Actor,
  requests: readonly CreateCylinderRequest[],
): Promise<NewOrRefused[]> {
  const planned = requests.map((request) => planOf(parts, actor.firmId, request));
  const plans = planned.filter((plan): plan is CylinderPlan => !(plan instanceof Problem));
  const made = await whichWereMade(
    manager,
    plans.flatMap(({ registers }) => registers),
  );
  const outcomes = planned.map((plan): NewOrRefused => {
    if (plan instanceof Problem) return plan;
    const [cylinder, tare] = plan.registers;
    const wasMade = made.get(cylinder) ?? false;
    if (wasMade !== true) return wasMade || true;
    return made.get(tare) === true ? false : new Problem('idReused');
  });
  const fresh = plans.filter(({ registers: [cylinder] }) => made.get(cylinder) === false);
  await insert(manager, fresh);
  const registers = fresh.flatMap((plan) => plan.registers);
  if (registers.length > 0) await journalNewRows({ ...parts, personId: actor.personId }, manager, registers);
  return outcomes;
}

async function insert(manager: EntityManager, plans: readonly CylinderPlan[]): Promise<void> {
  const cylinders = cylindersRepository(manager);
  await refusingReferences(REFERENCES, () => cylinders.insert(...plans.map(({ row }) => row)));
  await cylinders.addTare(...plans.map(({ tare }) => tare));
}

function planOf(parts: PostingParts, firmId: string, request: CreateCylinderRequest): CylinderPlan | Problem {
  const { id, refrigerant, tare } = request;
  const known = requireRefrigerant(parts.reference, refrigerant);
  if (!known.ok) return problemOfRefusals(known.refusals);
  const row = newRow(firmId, request);
  const tareRow = tareRowOf(firmId, id, { ...tare, reason: null });
  const registers: CylinderPlan['registers'] = [
    { noun: 'cylinder', subjectId: id, facts: factsOf(row) },
    tareRegister(tareRow),
  ];
  return { row, tare: tareRow, registers };
}

function newRow(firmId: string, request: CreateCylinderRequest): NewRow {
  const { owner } = request;
  return withLimit({
    firmId,
    id: request.id,
    tag: request.tag,
    kind: request.kind,
    refrigerant: request.refrigerant,
    contentState: request.contentState,
    ownerKind: owner.kind,
    ownerPartyId: owner.kind === 'party' ? owner.id : null,
    ownerCustomerId: owner.kind === 'customer' ? owner.id : null,
    ...waterCapacity(request.waterCapacity ?? null),
    ...stampedLimit(request.stampedLimit ?? null),
    limitMicrograms: null,
    servicePressureKPaGauge: request.servicePressureKPaGauge ?? null,
    retestDue: request.retestDue ?? null,
    heldBy: request.heldBy ?? null,
    batch: request.batch ?? null,
  });
}

export const withLimit = <Row extends NewRow>(row: Row): Row => ({
  ...row,
  limitMicrograms: cylinderLimit(row),
});

export const waterCapacity = (mass: TypedMass | null) => ({
  waterCapacityMicrograms: mass && (microgramsOfTyped(mass) as bigint),
  waterCapacityValue: mass?.value ?? null,
  waterCapacityUnit: mass?.unit ?? null,
});
export const stampedLimit = (mass: TypedMass | null) => ({
  stampedLimitMicrograms: mass && (microgramsOfTyped(mass) as bigint),
  stampedLimitValue: mass?.value ?? null,
  stampedLimitUnit: mass?.unit ?? null,
});

export function tareRowOf(
  firmId: string,
  cylinderId: string,
  { id, mass, validFrom, reason }: { id: string; mass: TypedMass; validFrom: string; reason: string | null },
): CylinderTareRow {
  return {
    firmId,
    id,
    cylinderId,
    massMicrograms: microgramsOfTyped(mass),
    typedValue: mass.value,
    typedUnit: mass.unit,
    validFrom: new Date(validFrom),
    reason,
  };
}

export function tareRegister({ firmId: _firm, id, ...facts }: CylinderTareRow): RegisterRow {
  return { noun: 'cylinderTare', subjectId: id, facts };
}
