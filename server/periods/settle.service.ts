import type { EntityManager } from 'typeorm';
import type { z } from 'zod';
import type { DifferenceItem } from '../../shared/books/books.schema.ts';
import type { EntryGroupRequest } from '../../shared/ledger/entry-group.schema.ts';
import { gramsText } from '../../shared/ledger/grams-text.ts';
import { endOfMonth } from '../../shared/periods/month.ts';
import type { SettleRequest, settlementResponse } from '../../shared/periods/periods.schema.ts';
import { gramsOfMicrograms, microgramsOfGrams, microgramsOfTyped } from '../../shared/units/mass.ts';
import { inFirm } from '../database/firm-scope.ts';
import { postWithin } from '../entries/entry-group.service.ts';
import type { PostingParts } from '../entries/post-group.ts';
import type { Actor } from '../http/actor.ts';
import { problemOfRefusals } from '../http/problem.ts';
import { lockHead } from '../journal/post-records.ts';
import { journalNewRows, type RegisterRow, wasMade } from '../journal/register-journal.ts';
import type { Made } from '../registers/register-rows.ts';
import { readFirmMonths } from './firm-months.repository.ts';
import { readOpenItems } from './open-items.service.ts';
import { requireOpenMonth } from './open-month.ts';
import { periodRepository } from './period.repository.ts';
import { type SettlementRow, settlementRepository } from './settlement.repository.ts';

type Settled = z.output<typeof settlementResponse>;

/**
 * Says what a difference turned out to be: a group of month close at the last moment of the month, and a record that
 * ties it to the statement whose difference it settles.
 * @throws Problem 409 for other content under the same id, 422
 */
export function settleDifference(parts: PostingParts, actor: Actor, request: SettleRequest): Promise<Made<Settled>> {
  return inFirm(parts.dataSource, actor, async (manager) => {
    await lockHead(manager);
    const made = await findMade(manager, request);
    if (made) return { isNew: false, value: made };
    const firm = await readFirmMonths(manager);
    requireOpenMonth(request.month, firm, parts.now());
    const difference = await requireDifference(manager, request, firm.timeZone);
    const massMicrograms = await requireMass(manager, request, difference);
    const row = rowOf(parts, actor, request, difference, massMicrograms);
    await postWithin(
      manager,
      parts,
      actor,
      groupOf(request, row, difference, endOfMonth(request.month, firm.timeZone)),
    );
    await settlementRepository(manager).insert(row);
    await journalNewRows({ ...parts, personId: actor.personId }, manager, [registerOf(request, row)]);
    return { isNew: true, value: present(request, massMicrograms) };
  });
}

async function findMade(manager: EntityManager, request: SettleRequest): Promise<Settled | null> {
  if (!(await wasMade(manager, registerOf(request)))) return null;
  const massMicrograms = await settlementRepository(manager).massOf(request.id);
  return present(request, massMicrograms);
}

async function requireDifference(
  manager: EntityManager,
  { key, month }: SettleRequest,
  timeZone: string,
): Promise<DifferenceItem> {
  const items = await readOpenItems(manager, month, timeZone);
  const item = items.find((each) => each.key === key);
  if (item?.kind !== 'difference') {
    throw problemOfRefusals([{ code: 'notOpenItem', path: '/key', given: key, allowed: month }]);
  }
  return item.difference;
}

/** Above zero: out of the difference. @throws Problem 422 */
async function requireMass(
  manager: EntityManager,
  { to, mass }: SettleRequest,
  { standsG }: DifferenceItem,
): Promise<bigint> {
  const stands = -microgramsOfGrams(standsG);
  const isSurplus = stands < 0n;
  if (to.place === 'supplier') {
    if (!to.id) throw problemOfRefusals([{ code: 'supplierRequired', path: '/to/id' }]);
    if (!(await periodRepository(manager).isSupplier(to.id))) {
      throw problemOfRefusals([{ code: 'notKnownHere', path: '/to/id', given: to.id }]);
    }
  } else if (to.id) {
    throw problemOfRefusals([{ code: 'supplierNotAllowed', path: '/to/id', given: to.id }]);
  }
  if (isSurplus && to.place === 'atmosphere') {
    throw problemOfRefusals([{ code: 'surplusNotFromAtmosphere', path: '/to/place', given: to.place }]);
  }
  if (!mass) return stands;
  const size = microgramsOfTyped(mass);
  const most = isSurplus ? -stands : stands;
  if (size > most) {
    const figures = { given: gramsText(size), allowed: gramsText(most) };
    throw problemOfRefusals([{ code: 'settlesMore', path: '/mass/value', ...figures }]);
  }
  return isSurplus ? -size : size;
}

/** The scale shows that a cylinder's is gone; of a unit or a reclaimer it is inferred. */
const lostAs = (kind: DifferenceItem['kind']) =>
  kind === 'cylinderDifference' || kind === 'supplierShortFill' ? ('measured' as const) : ('inferred' as const);

function rowOf(
  parts: PostingParts,
  actor: Actor,
  { id, month, to }: SettleRequest,
  difference: DifferenceItem,
  massMicrograms: bigint,
): SettlementRow {
  return {
    firmId: actor.firmId,
    id,
    entryId: parts.newId(),
    month,
    judgedGroupId: difference.groupId,
    judgedPlace: difference.subject.kind,
    judgedPlaceId: difference.subject.id,
    difference: difference.kind,
    settledTo: to.place,
    settledToId: to.id ?? null,
    settledToAs: to.place === 'atmosphere' ? lostAs(difference.kind) : null,
    refrigerant: difference.refrigerant,
    massMicrograms,
  };
}

function groupOf(
  { id, reason }: SettleRequest,
  row: SettlementRow,
  { subject }: DifferenceItem,
  occurredAt: number,
): EntryGroupRequest {
  const from = { place: row.difference };
  const to = {
    place: row.settledTo,
    ...(row.settledToId ? { id: row.settledToId } : {}),
    ...(row.settledToAs ? { as: row.settledToAs } : {}),
  };
  const isOut = row.massMicrograms > 0n;
  const size = isOut ? row.massMicrograms : -row.massMicrograms;
  return {
    groupId: id,
    schema: 1,
    kind: 'monthClose',
    unitId: subject.kind === 'unit' ? subject.id : null,
    occurredAt: new Date(occurredAt).toISOString(),
    entries: [
      {
        id: row.entryId,
        refrigerant: row.refrigerant,
        mass: { value: gramsText(size), unit: 'g' },
        from: isOut ? from : to,
        to: isOut ? to : from,
        howKnown: 'estimated',
      },
    ],
    reason,
  };
}

/** What was asked is what a resend is compared by; what the server worked out stands beside it. */
function registerOf({ id, month, key, to, mass, reason }: SettleRequest, row?: SettlementRow): RegisterRow {
  const asked = { month, key, to: { place: to.place, id: to.id ?? null }, mass: mass ?? null, reason };
  const decided = row && {
    entryId: row.entryId,
    judgedGroupId: row.judgedGroupId,
    judgedPlace: row.judgedPlace,
    judgedPlaceId: row.judgedPlaceId,
    difference: row.difference,
    settledToAs: row.settledToAs,
    refrigerant: row.refrigerant,
    massMicrograms: row.massMicrograms,
  };
  return { noun: 'settlement', subjectId: id, facts: asked, ...(decided ? { decided } : {}) };
}

const present = ({ id, key }: SettleRequest, massMicrograms: bigint): Settled => {
  return { id, groupId: id, key, massG: gramsOfMicrograms(massMicrograms) };
};
