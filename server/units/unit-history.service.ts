import type { EntityManager } from 'typeorm';
import type { z } from 'zod';
import type { addChargeBasisRequest } from '../../shared/charge-sheets/charge-sheet.schema.ts';
import type { EntryGroupResponse } from '../../shared/ledger/entry-group-response.schema.ts';
import type { PageQuery } from '../../shared/lists/list.schema.ts';
import { requireRefrigerant } from '../../shared/reference/require-row.ts';
import type {
  addFullChargeRequest,
  addLineSetRequest,
  addUnitRefrigerantRequest,
} from '../../shared/unit-register/unit.schema.ts';
import { microgramsOfTyped } from '../../shared/units/mass.ts';
import { inFirm } from '../database/firm-scope.ts';
import { journalAndJudgeAgain, outcomeOfRevision } from '../entries/judge-again.ts';
import { presentOutcome } from '../entries/posting-answer.ts';
import type { Actor } from '../http/actor.ts';
import { Problem, valueOrProblem } from '../http/problem.ts';
import { requireJobOfUnit } from '../jobs/job-of-unit.ts';
import { requestHash } from '../journal/canonical-text.ts';
import { lockHead } from '../journal/post-records.ts';
import { journalChange, type RegisterRow, wasMade } from '../journal/register-journal.ts';
import { refuseFuture } from '../registers/refuse-future.ts';
import { type Made, makeOnce } from '../registers/register-rows.ts';
import { datedFacts, PERSONAL } from './make-units.ts';
import { unitsRepository } from './unit.repository.ts';
import type { UnitParts } from './unit.service.ts';
import { unitHistoryRepository } from './unit-history.repository.ts';

const NOTE = ['note'];

/** A full charge as determined; the whole timeline of the unit is judged again by it. */
export function addFullCharge(
  parts: UnitParts,
  actor: Actor,
  unitId: string,
  request: z.output<typeof addFullChargeRequest>,
): Promise<Made<EntryGroupResponse>> {
  return reviseUnit(parts, actor, unitId, request, request.reason, async (manager) => {
    const unit = await requireUnit(manager, unitId);
    const validFrom = new Date(request.validFrom);
    const row = {
      firmId: actor.firmId,
      id: request.id,
      unitId,
      refrigerant: await refrigerantOn(manager, unitId, validFrom, unit.refrigerant),
      massMicrograms: microgramsOfTyped(request.mass) as bigint,
      typedValue: request.mass.value,
      typedUnit: request.mass.unit,
      method: request.method,
      validFrom,
      jobId: request.jobId ?? null,
      reason: request.reason,
    };
    return {
      row: { noun: 'unitFullCharge', subjectId: row.id, facts: datedFacts(row) },
      insert: () => unitHistoryRepository(manager).addFullCharge(row),
    };
  });
}

/** Another refrigerant from a day on (a retrofit); the unit itself shows the latest. */
export function addRefrigerant(
  parts: UnitParts,
  actor: Actor,
  unitId: string,
  request: z.output<typeof addUnitRefrigerantRequest>,
): Promise<Made<EntryGroupResponse>> {
  valueOrProblem(requireRefrigerant(parts.reference, request.refrigerant));
  return reviseUnit(parts, actor, unitId, request, null, async (manager) => {
    await requireUnit(manager, unitId);
    const { id, refrigerant, jobId = null } = request;
    const row = { firmId: actor.firmId, id, unitId, refrigerant, validFrom: new Date(request.validFrom), jobId };
    return {
      row: { noun: 'unitRefrigerant', subjectId: id, facts: datedFacts(row) },
      insert: async () => {
        await unitHistoryRepository(manager).addRefrigerant(row);
        await showLatestRefrigerant(parts, actor, manager, unitId);
      },
    };
  });
}

export function addLineSet(
  parts: UnitParts,
  actor: Actor,
  unitId: string,
  request: z.output<typeof addLineSetRequest>,
) {
  const { id, branches, note = null } = request;
  const row = { firmId: actor.firmId, id, unitId, validFrom: new Date(request.validFrom), branches, note };
  return makeOnce(
    parts,
    actor,
    { noun: 'lineSet', subjectId: id, facts: datedFacts(row), personal: NOTE },
    {},
    async (manager) => {
      await requireUnit(manager, unitId);
      await unitHistoryRepository(manager).addLineSet(row as Parameters<Repository['addLineSet']>[0]);
    },
    async (manager) => requireRow(await unitHistoryRepository(manager).findLineSet(id)),
  );
}

export function addChargeBasis(
  parts: UnitParts,
  actor: Actor,
  unitId: string,
  request: z.output<typeof addChargeBasisRequest>,
) {
  const { id, basis, manual, note = null } = request;
  valueOrProblem(requireRefrigerant(parts.reference, basis.refrigerant, '/basis/refrigerant'));
  const row = {
    firmId: actor.firmId,
    id,
    unitId,
    validFrom: new Date(request.validFrom),
    basis,
    document: manual.document,
    page: manual.page ?? null,
    note,
  };
  return makeOnce(
    parts,
    actor,
    { noun: 'chargeBasis', subjectId: id, facts: datedFacts(row), personal: NOTE },
    {},
    async (manager) => {
      await requireUnit(manager, unitId);
      await unitHistoryRepository(manager).addChargeBasis(row);
    },
    async (manager) => requireRow(await unitHistoryRepository(manager).findChargeBasis(id)),
  );
}

type Repository = ReturnType<typeof unitHistoryRepository>;

export const listFullCharges = (parts: UnitParts, actor: Actor, unitId: string, page: PageQuery) =>
  ofUnit(parts, actor, unitId, (repository) => repository.listFullCharges(unitId, page));
export const listLineSets = (parts: UnitParts, actor: Actor, unitId: string, page: PageQuery) =>
  ofUnit(parts, actor, unitId, (repository) => repository.listLineSets(unitId, page));
export const listChargeBases = (parts: UnitParts, actor: Actor, unitId: string, page: PageQuery) =>
  ofUnit(parts, actor, unitId, (repository) => repository.listChargeBases(unitId, page));

function ofUnit<T>(
  parts: UnitParts,
  actor: Actor,
  unitId: string,
  read: (repository: Repository) => Promise<T>,
): Promise<T> {
  return inFirm(parts.dataSource, actor, async (manager) => {
    await requireUnit(manager, unitId);
    return read(unitHistoryRepository(manager));
  });
}

interface DatedRevision {
  row: RegisterRow;
  insert(): Promise<void>;
}

/** Adds a dated row that the judge goes by, once, and posts what judging again changes. */
function reviseUnit(
  parts: UnitParts,
  actor: Actor,
  unitId: string,
  request: { id: string; validFrom: string; jobId?: string | null | undefined },
  reason: string | null,
  prepare: (manager: EntityManager) => Promise<DatedRevision>,
): Promise<Made<EntryGroupResponse>> {
  refuseFuture(parts, request.validFrom);
  return inFirm(parts.dataSource, actor, async (manager) => {
    await lockHead(manager);
    const { row, insert } = await prepare(manager);
    const revision = {
      id: request.id,
      of: { place: 'unit' as const, id: unitId },
      requestHash: requestHash(request),
      reason,
    };
    if (await wasMade(manager, row)) {
      const outcome = await outcomeOfRevision(manager, revision, row);
      return { isNew: false, value: presentOutcome(outcome, actor.locale) };
    }
    await requireJobOfUnit(manager, unitId, request.jobId ?? null);
    await insert();
    const outcome = await journalAndJudgeAgain(manager, parts, actor, revision, row);
    return { isNew: true, value: presentOutcome(outcome, actor.locale) };
  });
}

async function requireUnit(manager: EntityManager, unitId: string) {
  const unit = await unitsRepository(manager).find(unitId);
  if (!unit) throw new Problem('notFound');
  return unit;
}

function requireRow<T>(row: T | null): T {
  if (row === null) throw new Problem('notFound');
  return row;
}

/** A full charge is of the refrigerant that the unit is meant for on its day. */
async function refrigerantOn(manager: EntityManager, unitId: string, on: Date, current: string): Promise<string> {
  const dated = await unitHistoryRepository(manager).refrigerantsOf(unitId);
  return (dated.findLast(({ validFrom }) => validFrom <= on) ?? dated[0])?.refrigerant ?? current;
}

async function showLatestRefrigerant(parts: UnitParts, actor: Actor, manager: EntityManager, unitId: string) {
  const unit = await requireUnit(manager, unitId);
  const refrigerant = (await unitHistoryRepository(manager).refrigerantsOf(unitId)).at(-1)?.refrigerant;
  if (refrigerant === undefined || refrigerant === unit.refrigerant) return;
  const { firmId: _firm, id, version, ...facts } = unit;
  await unitsRepository(manager).update({ ...unit, refrigerant });
  const row: RegisterRow = { noun: 'unit', subjectId: id, facts: { ...facts, refrigerant }, personal: PERSONAL };
  await journalChange({ ...parts, personId: actor.personId }, manager, row, version + 1, facts);
}
