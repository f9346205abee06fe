import type { EntityManager } from 'typeorm';
import type { z } from 'zod';
import { cylinderLimit, pressureRatingHolds } from '../../shared/cylinder-fill/cylinder-limits.ts';
import type {
  addTareRequest,
  CreateCylinderRequest,
  Cylinder,
  CylinderListQuery,
  updateCylinderRequest,
} from '../../shared/cylinders/cylinder.schema.ts';
import type { EntryGroupResponse } from '../../shared/ledger/entry-group-response.schema.ts';
import { microgramsOfTyped, type TypedMass } from '../../shared/units/mass.ts';
import { inFirm } from '../database/firm-scope.ts';
import { journalAndJudgeAgain, outcomeOfRevision } from '../entries/judge-again.ts';
import type { PostingParts } from '../entries/post-group.ts';
import { presentOutcome } from '../entries/posting-answer.ts';
import type { Actor } from '../http/actor.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import { requestHash } from '../journal/canonical-text.ts';
import { lockHead } from '../journal/post-records.ts';
import { journalNewRows, type RegisterRow, wasMade } from '../journal/register-journal.ts';
import { changeRow, type Made, refusingReferences, taken } from '../registers/register-rows.ts';
import {
  type CylinderRow,
  type CylinderTareRow,
  type CylinderViewRow,
  cylindersRepository,
  presentCylinder,
} from './cylinder.repository.ts';

const REFERENCES = {
  cylinder_owner_party_fkey: '/owner/id',
  cylinder_owner_customer_fkey: '/owner/id',
  cylinder_held_by_fkey: '/heldBy',
};
type NewRow = Omit<CylinderRow, 'version'>;
const factsOf = ({ firmId: _firm, id: _id, version: _version, ...facts }: NewRow & { version?: number }) => facts;

export function listCylinders(parts: PostingParts, actor: Actor, query: CylinderListQuery) {
  return inFirm(parts.dataSource, actor, (manager) =>
    cylindersRepository(manager).list(query, (row) => present(parts, row)),
  );
}

export function getCylinder(parts: PostingParts, actor: Actor, id: string) {
  return inFirm(parts.dataSource, actor, (manager) => requireView(parts, manager, id));
}

export function createCylinder(
  parts: PostingParts,
  actor: Actor,
  request: CreateCylinderRequest,
): Promise<Made<Cylinder>> {
  const { id, refrigerant, tare } = request;
  if (!parts.reference.findRefrigerant(refrigerant)) {
    const given = { given: refrigerant, params: { given: refrigerant } };
    throw problemOfRefusals([{ code: 'unknownRefrigerant', path: '/refrigerant', ...given }]);
  }
  const row = newRow(parts, actor.firmId, request);
  const tareRow = tareRowOf(actor.firmId, id, { ...tare, reason: null });
  const registers: [RegisterRow, RegisterRow] = [
    { noun: 'cylinder', subjectId: id, facts: factsOf(row) },
    tareRegister(tareRow),
  ];
  return inFirm(parts.dataSource, actor, async (manager) => {
    await lockHead(manager);
    const isNew = !(await wasMade(manager, registers[0]));
    if (isNew) {
      await refusingReferences(REFERENCES, () => cylindersRepository(manager).insert(row));
      await cylindersRepository(manager).addTare(tareRow);
      await journalNewRows({ ...parts, personId: actor.personId }, manager, registers);
    } else if (!(await wasMade(manager, registers[1]))) {
      throw new Problem('idReused');
    }
    return { isNew, value: await requireView(parts, manager, id) };
  });
}

export function updateCylinder(
  parts: PostingParts,
  actor: Actor,
  id: string,
  version: number,
  request: z.output<typeof updateCylinderRequest>,
) {
  return changeRow<CylinderRow, Cylinder>(
    parts,
    actor,
    {
      noun: 'cylinder',
      id,
      version,
      references: REFERENCES,
      find: (manager) => cylindersRepository(manager).find(id),
      factsOf,
      changed: (row) =>
        withLimit(parts, {
          ...row,
          tag: taken(request.tag, row.tag),
          contentState: taken(request.contentState, row.contentState),
          retestDue: taken(request.retestDue, row.retestDue),
          heldBy: taken(request.heldBy, row.heldBy),
          batch: taken(request.batch, row.batch),
          ...(request.waterCapacity === undefined ? {} : waterCapacity(request.waterCapacity)),
          ...(request.stampedLimit === undefined ? {} : stampedLimit(request.stampedLimit)),
          servicePressureKPaGauge: taken(request.servicePressureKPaGauge, row.servicePressureKPaGauge),
        }),
      update: (manager, row) => cylindersRepository(manager).update(row),
    },
    (manager) => requireView(parts, manager, id),
  );
}

/** A revised tare: what the cylinder's readings say is judged again from its day on. */
export function addTare(
  parts: PostingParts,
  actor: Actor,
  cylinderId: string,
  request: z.output<typeof addTareRequest>,
): Promise<Made<EntryGroupResponse>> {
  const { id, tare, validFrom, reason } = request;
  const row = tareRowOf(actor.firmId, cylinderId, { id, mass: tare, validFrom, reason });
  const of = { place: 'cylinder' as const, id: cylinderId };
  const revision = { id, of, requestHash: requestHash(request), reason };
  return inFirm(parts.dataSource, actor, async (manager) => {
    await lockHead(manager);
    if (!(await cylindersRepository(manager).find(cylinderId))) throw new Problem('notFound');
    if (await wasMade(manager, tareRegister(row))) {
      const outcome = await outcomeOfRevision(manager, revision, tareRegister(row));
      return { isNew: false, value: presentOutcome(outcome, actor.locale) };
    }
    await cylindersRepository(manager).addTare(row);
    const outcome = await journalAndJudgeAgain(manager, parts, actor, revision, tareRegister(row));
    return { isNew: true, value: presentOutcome(outcome, actor.locale) };
  });
}

function newRow(parts: PostingParts, firmId: string, request: CreateCylinderRequest): NewRow {
  const { owner } = request;
  return withLimit(parts, {
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

const withLimit = <Row extends NewRow>({ reference }: PostingParts, row: Row): Row => ({
  ...row,
  limitMicrograms: cylinderLimit(row, reference),
});

const waterCapacity = (mass: TypedMass | null) => ({
  waterCapacityMicrograms: mass && (microgramsOfTyped(mass) as bigint),
  waterCapacityValue: mass?.value ?? null,
  waterCapacityUnit: mass?.unit ?? null,
});
const stampedLimit = (mass: TypedMass | null) => ({
  stampedLimitMicrograms: mass && (microgramsOfTyped(mass) as bigint),
  stampedLimitValue: mass?.value ?? null,
  stampedLimitUnit: mass?.unit ?? null,
});

function tareRowOf(
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

function tareRegister({ firmId: _firm, id, ...facts }: CylinderTareRow): RegisterRow {
  return { noun: 'cylinderTare', subjectId: id, facts };
}

async function requireView(parts: PostingParts, manager: EntityManager, id: string): Promise<Cylinder> {
  const found = await cylindersRepository(manager).findView(id);
  if (!found) throw new Problem('notFound');
  return present(parts, found);
}

export const present = ({ reference }: Pick<PostingParts, 'reference'>, row: CylinderViewRow): Cylinder =>
  presentCylinder(row, pressureRatingHolds(row.servicePressureKPaGauge, row.refrigerant, reference));
