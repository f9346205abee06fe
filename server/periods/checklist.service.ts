import type { EntityManager } from 'typeorm';
import { differenceKey, openItemKey } from '../../shared/periods/item-key.ts';
import { endOfMonth, type Month, monthsBetween, startOfMonth } from '../../shared/periods/month.ts';
import type { Carried, Checklist, OpenItem, PeriodRow, PeriodsResponse } from '../../shared/periods/periods.schema.ts';
import type { Locale } from '../../shared/session/session.schema.ts';
import { monthInZone } from '../../shared/units/calendar.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import { readBooks, readDifferences } from '../books/books.service.ts';
import { inFirm } from '../database/firm-scope.ts';
import { placeView } from '../entries/place-labels.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { canonicalText, sha256Hex } from '../journal/canonical-text.ts';
import { type FirmMonths, readFirmMonths } from './firm-months.repository.ts';
import { type CarriedRow, type MonthSpan, openItemsRepository } from './open-items.repository.ts';
import { type ClosedPeriod, periodRepository, type SettledSumRow } from './period.repository.ts';

/** The most differences that one month's list holds. */
const MOST = 2_000;

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
    const open = state === 'closed' ? { items: [], notListed: 0 } : await readOpenItems(manager, month, firm.timeZone);
    const closed = state === 'closed' ? await periods.find(month) : null;
    const { equation } = await readBooks(manager, { from: month, to: month });
    return {
      month,
      state,
      timeZone: firm.timeZone,
      ...open,
      settled: (await periods.settledIn(month)).flatMap((row) => settledRowOf(row, actor.locale)),
      undecided: undecided(open.items).length,
      sumsHash: await hashSums(manager, month),
      equation,
      signedOff: closed ? await signedOffOf(manager, closed) : null,
    };
  });
}

export const undecided = (items: readonly OpenItem[]): OpenItem[] =>
  items.filter(({ needsDecision, carried }) => needsDecision && carried === null);

/** Of which sums a sign-off speaks. */
export async function hashSums(manager: EntityManager, month: Month): Promise<string> {
  return sha256Hex(canonicalText(await periodRepository(manager).readSums(month)));
}

/** Everything that is open at the end of a month, with whoever carries it. */
export async function readOpenItems(
  manager: EntityManager,
  month: Month,
  timeZone: string,
): Promise<{ items: OpenItem[]; notListed: number }> {
  const open = openItemsRepository(manager);
  const span: MonthSpan = {
    month,
    start: new Date(startOfMonth(month, timeZone)),
    end: new Date(endOfMonth(month, timeZone) + 1),
  };
  const decisions = carriedOf(await open.carried(month), month);
  const differences = await readDifferences(manager, { from: null, to: month, standingOnly: true, most: MOST });
  const items: OpenItem[] = [
    ...differences.items.map((difference): OpenItem => {
      const { verdict, subject, groupId, kind, refrigerant } = difference;
      const key = differenceKey({ groupId, subjectId: subject.id, kind, refrigerant });
      const needsDecision = verdict === 'notExplained' || verdict === 'lookAgain';
      return { kind: 'difference', needsDecision, ...decisions(key), difference };
    }),
    ...(await open.weighIns(span)).map(({ startedAt, ...row }): OpenItem => {
      const key = openItemKey('weighIn', row.groupId);
      return {
        kind: 'weighIn',
        needsDecision: true,
        ...decisions(key),
        ...row,
        startedAt: startedAt.toISOString(),
      };
    }),
    ...(await open.unweighed(span)).map(({ content, lastWeighedAt, ...row }): OpenItem => {
      return {
        kind: 'cylinder',
        needsDecision: true,
        ...decisions(openItemKey('cylinder', row.cylinderId)),
        ...row,
        contentG: gramsOfMicrograms(BigInt(content)),
        lastWeighedAt: lastWeighedAt?.toISOString() ?? null,
      };
    }),
    ...(await open.jobsWithoutPosting(span)).map(({ openedAt, closedAt, ...row }): OpenItem => {
      return {
        kind: 'job',
        needsDecision: true,
        ...decisions(openItemKey('job', row.jobId)),
        ...row,
        openedAt: openedAt.toISOString(),
        closedAt: closedAt?.toISOString() ?? null,
      };
    }),
  ];
  return { items, notListed: differences.notListed.count };
}

function carriedOf(rows: readonly CarriedRow[], month: Month) {
  const latest = new Map<string, Carried>();
  const now = new Map<string, Carried>();
  for (const { decidedAt, key, id: _id, ...row } of rows) {
    const decision = { ...row, decidedAt: decidedAt.toISOString() };
    if (row.month === month) now.set(key, decision);
    else latest.set(key, decision);
  }
  return (key: string) => ({ key, carried: now.get(key) ?? null, carriedBefore: latest.get(key) ?? null });
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

async function signedOffOf(manager: EntityManager, period: ClosedPeriod): Promise<Checklist['signedOff']> {
  const periods = periodRepository(manager);
  const signed = await periods.readSignedOff(period.id);
  const carried = signed?.carried ?? [];
  const names = await periods.nameOf(carried.map(({ carriedBy }) => carriedBy));
  const reasons = await periods.reasonsOf(carried.map(({ carriedItemId }) => carriedItemId));
  return {
    at: period.closedAt.toISOString(),
    byName: period.closedByName,
    note: signed?.note ?? null,
    carried: carried.map(({ key, label, carriedBy, carriedItemId }) => ({
      key,
      label,
      personId: carriedBy,
      name: names.get(carriedBy) ?? '',
      reason: reasons.get(carriedItemId) ?? '',
    })),
  };
}
