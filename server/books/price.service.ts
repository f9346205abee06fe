import type { z } from 'zod';
import type { AddPriceRequest, priceResponse } from '../../shared/books/books.schema.ts';
import { microsPerKg } from '../../shared/books/price.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import { problemOfRefusals } from '../http/problem.ts';
import { lockHead } from '../journal/post-records.ts';
import { journalNewRows, type RegisterRow, wasMade } from '../journal/register-journal.ts';
import type { Made } from '../registers/register-rows.ts';
import { type BooksParts, readCurrency } from './books.service.ts';
import { type PriceRow, priceRepository } from './price.repository.ts';

type Price = z.output<typeof priceResponse>;

/**
 * What a purchase cost, or what it really cost: a later price of the same purchase counts instead, and both stay.
 * @throws Problem 409 for other content under the same id, 422
 */
export function addPrice(parts: BooksParts, actor: Actor, request: AddPriceRequest): Promise<Made<Price>> {
  const { id, groupId, refrigerant, price } = request;
  return inFirm(parts.dataSource, actor, async (manager) => {
    await lockHead(manager);
    const prices = priceRepository(manager);
    const currency = await readCurrency(manager);
    const isFirst = !(await prices.hasAny());
    const asked = request.currency ?? currency;
    if (!isFirst && asked !== currency) {
      throw problemOfRefusals([{ code: 'currencyOfFirm', path: '/currency', given: asked, allowed: currency }]);
    }
    if (!(await prices.wasBought(groupId, refrigerant))) {
      throw problemOfRefusals([{ code: 'priceNotBought', path: '/refrigerant', given: refrigerant }]);
    }
    const row: PriceRow = {
      firmId: actor.firmId,
      id,
      groupId,
      refrigerant,
      typedValue: price.value,
      typedUnit: price.per,
      currency: asked,
      microsPerKg: microsPerKg(price),
      givenAt: parts.now(),
    };
    const register = registerOf(row);
    const isNew = !(await wasMade(manager, register));
    if (isNew) {
      await prices.insert(row);
      await journalNewRows({ ...parts, personId: actor.personId }, manager, [register]);
    }
    return { isNew, value: present(row) };
  });
}

/** When it was given is the record's own time, and no part of what a resend is compared by. */
function registerOf({ firmId: _firm, id, givenAt: _at, ...facts }: PriceRow): RegisterRow {
  return { noun: 'purchasePrice', subjectId: id, facts };
}

const present = (row: PriceRow): Price => ({
  id: row.id,
  groupId: row.groupId,
  refrigerant: row.refrigerant,
  value: row.typedValue,
  per: row.typedUnit,
  currency: row.currency,
  perKg: Number(row.microsPerKg) / 1e6,
  givenAt: row.givenAt.toISOString(),
});
