import type { EntityManager } from 'typeorm';
import type { CloseRequest, CloseResponse, OpenItem } from '../../shared/periods/periods.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import { lockHead, postRecords } from '../journal/post-records.ts';
import { newRowRecords, type RegisterRow, wasMade } from '../journal/register-journal.ts';
import type { Made } from '../registers/register-rows.ts';
import { readFirmMonths } from './firm-months.repository.ts';
import { openItemsRepository } from './open-items.repository.ts';
import { hashToSign, readOpenItems, undecided } from './open-items.service.ts';
import { requireNextMonth } from './open-month.ts';
import { periodRepository } from './period.repository.ts';
import { sealAfterClose } from './seal-after-close.ts';

/**
 * The owner signs a month off: everything open is settled or carried by name, the sums and the names are chained, and
 * from then on the month takes nothing more. Then the chain is sealed.
 * @throws Problem 409 for other content under the same id, 412 when sums or names are not those that were seen, 422
 */
export async function closeMonth(parts: Parts, actor: Actor, request: CloseRequest): Promise<Made<CloseResponse>> {
  const isNew = await inFirm(parts.dataSource, actor, async (manager) => {
    await lockHead(manager);
    if (await wasMade(manager, registerOf(request))) return false;
    await closeWithin(parts, manager, actor, request);
    return true;
  });
  const seal = await sealAfterClose(parts, actor);
  return {
    isNew,
    value: { ...(await inFirm(parts.dataSource, actor, (manager) => present(manager, request.id))), seal },
  };
}

async function closeWithin(parts: Parts, manager: EntityManager, actor: Actor, request: CloseRequest): Promise<void> {
  const { month } = request;
  const firm = await readFirmMonths(manager);
  requireNextMonth(month, firm, parts.now());
  const items = await readOpenItems(manager, month, firm.timeZone);
  if ((await hashToSign(manager, month, items)) !== request.sumsHash) {
    throw new Problem('seenChanged', { errors: [{ code: 'seenChanged', path: '/sumsHash' }] });
  }
  const open = undecided(items);
  if (open.length > 0) {
    const errors = open.map((item) => ({ code: 'itemOpen', path: `/items/${item.key}`, given: labelOf(item) }));
    throw new Problem('monthNotSettled', { errors });
  }
  const carried = await carriedFacts(manager, month, items);
  const periods = periodRepository(manager);
  const register = registerOf(request, {
    throughSequence: firm.sequence,
    sums: await periods.readSums(month),
    settlements: (await periods.settledIn(month)).map(({ id }) => id),
    carried,
  });
  const { records, texts } = newRowRecords({ ...parts, personId: actor.personId }, [register]);
  const [record] = await postRecords(manager, records, { texts });
  await periods.close(String(record?.recordId));
}

/** Who carries what, by ids; the reasons stand in the records of the carried items. */
async function carriedFacts(manager: EntityManager, month: string, items: readonly OpenItem[]) {
  const rows = await openItemsRepository(manager).carried(month);
  const byKey = new Map(rows.filter((row) => row.month === month).map((row) => [row.key, row]));
  return items.flatMap((item) => {
    const row = byKey.get(item.key);
    return row ? [{ key: item.key, label: labelOf(item), carriedBy: row.personId, carriedItemId: row.id }] : [];
  });
}

/** The tag by which people know it; no words that somebody typed. */
function labelOf(item: OpenItem): string {
  switch (item.kind) {
    case 'difference':
      return item.difference.subject.label;
    case 'weighIn':
    case 'cylinder':
      return item.cylinderTag;
    case 'job':
      return item.unitLabel;
  }
}

/** What was asked is what a resend is compared by; what was signed off stands beside it in the same record. */
function registerOf({ id, month, sumsHash, note }: CloseRequest, decided?: RegisterRow['decided']): RegisterRow {
  const facts = { month, sumsHash, note: note ?? null };
  return { noun: 'period', subjectId: id, facts, personal: ['note'], ...(decided ? { decided } : {}) };
}

async function present(manager: EntityManager, id: string): Promise<Omit<CloseResponse, 'seal'>> {
  const period = await periodRepository(manager).findById(id);
  const { firstOpenMonth } = await readFirmMonths(manager);
  if (!period || !firstOpenMonth) throw problemOfRefusals([{ code: 'monthNotSettled', path: '' }]);
  return {
    id: period.id,
    month: period.month,
    firstOpenMonth,
    closedAt: period.closedAt.toISOString(),
    closedByName: period.closedByName,
    recordSequence: period.recordSequence,
  };
}
