import type { EntityManager } from 'typeorm';
import type { z } from 'zod';
import { chargeCalculation } from '../../shared/charge/charge-calculation.ts';
import type { ChargeSheet, createChargeSheetRequest } from '../../shared/charge-sheets/charge-sheet.schema.ts';
import { checkRoomOfSheet } from '../../shared/charge-sheets/room-of-sheet.ts';
import type { PageQuery } from '../../shared/lists/list.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import { requireJobOfUnit } from '../jobs/job-of-unit.ts';
import { messageFor } from '../messages/translate.ts';
import { type Made, makeOnce } from '../registers/register-rows.ts';
import { unitsRepository } from '../units/unit.repository.ts';
import { chargeSheetsRepository } from './charge-sheet.repository.ts';

const REFERENCES = { charge_sheet_unit_fkey: '' };

/**
 * Freezes a calculation: the server works it out again from the request, so that a sheet never holds a figure that its
 * inputs do not give. Never changed afterwards.
 * @throws Problem 422, also where the charge is over what the room takes, or the job is of another unit
 */
export function createChargeSheet(
  parts: Parts,
  actor: Actor,
  unitId: string,
  body: z.output<typeof createChargeSheetRequest>,
): Promise<Made<ChargeSheet>> {
  const { id, request, manual = null, room = null, jobId = null } = body;
  const calculated = chargeCalculation.calculate(request, parts.reference);
  if (!calculated.ok) {
    throw problemOfRefusals(calculated.refusals.map((refusal) => ({ ...refusal, path: `/request${refusal.path}` })));
  }
  const result = chargeCalculation.present(calculated.value, (key, params) => messageFor(key, actor.locale, params));
  const { refrigerant } = request.basis;
  const fits = checkRoomOfSheet({ refrigerant, result, room }, parts.reference);
  if (!fits.ok) throw problemOfRefusals(fits.refusals);
  const madeAt = parts.now();
  const row = {
    firmId: actor.firmId,
    id,
    unitId,
    jobId,
    madeAt,
    madeBy: actor.personId,
    request,
    result,
    manualDocument: manual?.document ?? null,
    manualPage: manual?.page ?? null,
    room,
  };
  return makeOnce(
    parts,
    actor,
    {
      noun: 'chargeSheet',
      subjectId: id,
      facts: { unitId, jobId, request, manual, room },
      decided: { result, madeAt, madeBy: actor.personId },
    },
    REFERENCES,
    async (manager) => {
      const unit = await requireUnit(manager, unitId);
      if (unit.refrigerant !== refrigerant) {
        const figures = { given: refrigerant, allowed: unit.refrigerant };
        const path = '/request/basis/refrigerant';
        throw problemOfRefusals([{ code: 'notTheUnitsRefrigerant', path, ...figures }]);
      }
      await requireJobOfUnit(manager, unitId, jobId);
      await chargeSheetsRepository(manager).insert(row);
    },
    (manager) => requireView(manager, unitId, id),
  );
}

export function listChargeSheets(parts: Parts, actor: Actor, unitId: string, page: PageQuery) {
  return inFirm(parts.dataSource, actor, async (manager) => {
    await requireUnit(manager, unitId);
    return chargeSheetsRepository(manager).list(unitId, page);
  });
}

export function getChargeSheet(parts: Parts, actor: Actor, id: string): Promise<ChargeSheet> {
  return inFirm(parts.dataSource, actor, async (manager) => {
    const found = await chargeSheetsRepository(manager).findView(id);
    if (!found) throw new Problem('notFound');
    return found;
  });
}

async function requireUnit(manager: EntityManager, unitId: string) {
  const unit = await unitsRepository(manager).find(unitId);
  if (!unit) throw new Problem('notFound');
  return unit;
}

async function requireView(manager: EntityManager, unitId: string, id: string): Promise<ChargeSheet> {
  const found = await chargeSheetsRepository(manager).findView(id);
  if (found?.unitId !== unitId) throw new Problem('notFound');
  return found;
}
