import type { EntityManager } from 'typeorm';
import { type Month, monthsBetween } from '../../shared/periods/month.ts';
import type { Checklist, PeriodRow, PeriodsResponse } from '../../shared/periods/periods.schema.ts';
import type { Locale } from '../../shared/session/session.schema.ts';
import { monthInZone } from '../../shared/units/calendar.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import { readBooks } from '../books/books.service.ts';
import { inFirm } from '../database/firm-scope.ts';
import { placeView } from '../entries/place-labels.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { type FirmMonths, readFirmMonths } from './firm-months.repository.ts';
import { hashToSign, listedOf, readOpenItems, undecided } from './open-items.service.ts';
import { periodRepository, type SettledSumRow } from './period.repository.ts';

export function listPeriods(parts: Pick<Parts, 'dataSource' | 'now'>, actor: Actor): Promise<PeriodsResponse> {
  return inFirm(parts.dataSource, actor, async (manager) => {
    const firm = await readFirmMonths(manager);
    const periods = periodRepository(manager);
    const running = monthInZone(parts.now().getTime(), firm.timeZone);
    const counts = new Map((await periods.entryCounts()).map(({ month, entries }) => [month, entries]));
    const closed = new Map((await periods.list()).map((period) => [period.month, period]));
    const first = [firm.firstMonth, ...closed.keys()].filter((month) => month !== null).sort()[0] ?? running;
    const months = monthsBetween(first, [running, ...counts.keys()].sort().at(-1) as Month).reverse();
    return {
      firstOpenMonth: firm.firstOpenMonth,
      next: nextToClose(firm, running),
      timeZone: firm.timeZone,
      items: months.map((month): PeriodRow => {
        const period = closed.get(month);
        return {
          month,
          state: stateOf(month, firm, running),
          closedAt: period?.closedAt.toISOString() ?? null,
          closedByName: period?.closedByName ?? null,
          entryCount: counts.get(month) ?? 0,
        };
      }),
    };
  });
}

/** The first open month, or the first with an entry; null while it is not over. */
export function nextToClose({ firstOpenMonth, firstMonth }: FirmMonths, running: Month): Month | null {
  const next = firstOpenMonth ?? firstMonth;
  return next !== null && next < running ? next : null;
}

export function stateOf(month: Month, firm: FirmMonths, running: Month): PeriodRow['state'] {
  if (firm.firstOpenMonth !== null && month < firm.firstOpenMonth) return 'closed';
  if (month >= running) return 'running';
  return month === nextToClose(firm, running) ? 'next' : 'over';
}

export function getChecklist(parts: Pick<Parts, 'dataSource' | 'now'>, actor: Actor, month: Month): Promise<Checklist> {
  return inFirm(parts.dataSource, actor, async (manager) => {
    const firm = await readFirmMonths(manager);
    const state = stateOf(month, firm, monthInZone(parts.now().getTime(), firm.timeZone));
    const periods = periodRepository(manager);
    const open = state === 'closed' ? [] : await readOpenItems(manager, month, firm.timeZone);
    const { items, notListed } = listedOf(open);
    const closed = state === 'closed' ? await signedOffOf(manager, month) : null;
    const { equation } = await readBooks(manager, { from: month, to: month });
    return {
      month,
      state,
      timeZone: firm.timeZone,
      items,
      notListed,
      settled: (await periods.settledIn(month)).flatMap((row) => settledRowOf(row, actor.locale)),
      undecided: undecided(open).length,
      carried: open.filter(({ carried }) => carried !== null).length,
      sumsHash: closed?.sumsHash ?? (await hashToSign(manager, month, open)),
      equation,
      signedOff: closed?.signedOff ?? null,
    };
  });
}

function settledRowOf(row: SettledSumRow, locale: Locale): Checklist['settled'] {
  const mass = BigInt(row.left);
  if (mass === 0n) return [];
  const fields = { place: row.toPlace, as: row.toAs, id: null } as Parameters<typeof placeView>[0];
  return [
    {
      id: row.id,
      groupId: row.groupId,
      ofGroupId: row.judgedGroupId,
      label: row.label,
      refrigerant: row.refrigerant,
      massG: gramsOfMicrograms(mass),
      to: {
        place: row.toPlace,
        as: row.toAs,
        label: row.toLabel ?? placeView(fields, new Map(), locale).label,
      },
      byName: row.byName,
      at: row.at.toISOString(),
      reason: row.reason,
    },
  ];
}

/** As the record of the sign-off says it, with the hash that was signed. */
async function signedOffOf(
  manager: EntityManager,
  month: Month,
): Promise<{ sumsHash: string; signedOff: NonNullable<Checklist['signedOff']> } | null> {
  const periods = periodRepository(manager);
  const period = await periods.find(month);
  const signed = period && (await periods.readSignedOff(period.id));
  if (!period || !signed) return null;
  const { carried, sumsHash, note } = signed;
  const names = await periods.nameOf(carried.map(({ carriedBy }) => carriedBy));
  const reasons = await periods.reasonsOf(carried.map(({ carriedItemId }) => carriedItemId));
  return {
    sumsHash,
    signedOff: {
      at: period.closedAt.toISOString(),
      byName: period.closedByName,
      note,
      carried: carried.map(({ key, label, carriedBy, carriedItemId }) => ({
        key,
        label,
        personId: carriedBy,
        name: names.get(carriedBy) ?? '',
        reason: reasons.get(carriedItemId) ?? '',
      })),
    },
  };
}
