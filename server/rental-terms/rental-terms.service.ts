import type { EntityManager } from 'typeorm';
import { rentalOn } from '../../shared/rental-terms/rental-so-far.ts';
import type { AddRentalTermsRequest, RentalView } from '../../shared/rental-terms/rental-terms.schema.ts';
import { dayInZone } from '../../shared/units/calendar.ts';
import { cylindersRepository } from '../cylinders/cylinder.repository.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import { type Made, makeOnce } from '../registers/register-rows.ts';
import { rentalTermsRepository } from './rental-terms.repository.ts';

type RentalParts = Pick<Parts, 'dataSource' | 'now' | 'newId'>;

export function getRental(parts: RentalParts, actor: Actor, cylinderId: string): Promise<RentalView> {
  return inFirm(parts.dataSource, actor, async (manager) => {
    await requireCylinder(manager, cylinderId);
    return readRental(parts, manager, cylinderId);
  });
}

/** New terms from a day on, or that it was given back. Only what belongs to a party is rented. */
export function addRentalTerms(
  parts: RentalParts,
  actor: Actor,
  cylinderId: string,
  { id, since, conditions }: AddRentalTermsRequest,
): Promise<Made<RentalView>> {
  const facts = {
    cylinderId,
    since,
    deposit: conditions?.deposit ?? null,
    dailyRate: conditions?.dailyRate ?? null,
    currency: conditions?.currency ?? null,
  };
  return makeOnce(
    parts,
    actor,
    { noun: 'rentalTerms', subjectId: id, facts },
    {},
    async (manager) => {
      const { ownerKind } = await requireCylinder(manager, cylinderId);
      if (ownerKind !== 'party') {
        throw problemOfRefusals([{ code: 'cylinderNotRented', path: '/conditions', given: ownerKind }]);
      }
      await rentalTermsRepository(manager).insert({ firmId: actor.firmId, id, ...facts });
    },
    (manager) => readRental(parts, manager, cylinderId),
  );
}

async function requireCylinder(manager: EntityManager, id: string) {
  const found = await cylindersRepository(manager).find(id);
  if (!found) throw new Problem('notFound');
  return found;
}

async function readRental(parts: RentalParts, manager: EntityManager, cylinderId: string): Promise<RentalView> {
  const rows = rentalTermsRepository(manager);
  const items = await rows.ofCylinder(cylinderId);
  return { items, rental: rentalOn(items, dayInZone(parts.now().getTime(), await rows.timeZone())) };
}
