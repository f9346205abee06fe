import type { z } from 'zod';
import type { CarryRequest, carryResponse } from '../../shared/periods/periods.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { problemOfRefusals } from '../http/problem.ts';
import { lockHead } from '../journal/post-records.ts';
import { journalNewRows, type RegisterRow, wasMade } from '../journal/register-journal.ts';
import type { Made } from '../registers/register-rows.ts';
import { readFirmMonths } from './firm-months.repository.ts';
import { readOpenItems } from './open-items.service.ts';
import { requireOpenMonth } from './open-month.ts';
import { type CarriedItemRow, periodRepository } from './period.repository.ts';

/**
 * Carries open items by name: they stay open, and the month can be closed with them.
 * @throws Problem 409 for other content under the same id, 422
 */
export function carryItems(
  parts: Pick<Parts, 'dataSource' | 'now' | 'newId'>,
  actor: Actor,
  request: CarryRequest,
): Promise<Made<z.output<typeof carryResponse>>> {
  const { month, carriedBy, reason, items } = request;
  return inFirm(parts.dataSource, actor, async (manager) => {
    await lockHead(manager);
    const periods = periodRepository(manager);
    const rows = items.map(({ id, key }): CarriedItemRow => {
      return { firmId: actor.firmId, id, month, itemKey: key, carriedBy, reason, decidedAt: parts.now() };
    });
    const missing: CarriedItemRow[] = [];
    for (const row of rows) if (!(await wasMade(manager, registerOf(row)))) missing.push(row);
    if (missing.length > 0) {
      const firm = await readFirmMonths(manager);
      requireOpenMonth(month, firm, parts.now());
      if (!(await periods.isActiveMember(carriedBy))) {
        throw problemOfRefusals([{ code: 'notKnownHere', path: '/carriedBy', given: carriedBy }]);
      }
      const open = new Set((await readOpenItems(manager, month, firm.timeZone)).map(({ key }) => key));
      const refusals = missing
        .filter(({ itemKey }) => !open.has(itemKey))
        .map(({ id, itemKey }) => ({
          code: 'notOpenItem',
          path: `/items/${items.findIndex((item) => item.id === id)}/key`,
          given: itemKey,
          allowed: month,
        }));
      if (refusals.length > 0) throw problemOfRefusals(refusals);
      for (const row of missing) await periods.insertCarried(row);
      await journalNewRows({ ...parts, personId: actor.personId }, manager, missing.map(registerOf));
    }
    return { isNew: missing.length > 0, value: { count: items.length } };
  });
}

/** When it was decided is the record's own time, and no part of what a resend is compared by. */
function registerOf({ firmId: _firm, id, decidedAt: _at, ...facts }: CarriedItemRow): RegisterRow {
  return { noun: 'carriedItem', subjectId: id, facts };
}
