import type { EntityManager } from 'typeorm';
import { differenceKey, openItemKey } from '../../shared/periods/item-key.ts';
import { endOfMonth, type Month, startOfMonth } from '../../shared/periods/month.ts';
import type { Carried, OpenItem } from '../../shared/periods/periods.schema.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import { readDifferences } from '../books/books.service.ts';
import { canonicalText, sha256Hex } from '../journal/canonical-text.ts';
import { type CarriedRow, type MonthSpan, openItemsRepository } from './open-items.repository.ts';
import { periodRepository } from './period.repository.ts';

/** The most items that one month's list shows at a time. */
const MOST_LISTED = 2_000;

/** Those that need a decision and have none, of the items given. A month is judged by all of its items. */
export const undecided = (items: readonly OpenItem[]): OpenItem[] =>
  items.filter(({ needsDecision, carried }) => needsDecision && carried === null);

/** What a list shows of the items, in their order. What waits for a decision comes first into it, so that none hides. */
export function listedOf(items: readonly OpenItem[], most = MOST_LISTED): { items: OpenItem[]; notListed: number } {
  const waiting = undecided(items);
  const others = items.filter(({ needsDecision, carried }) => !needsDecision || carried !== null);
  const shown = new Set([...waiting, ...others].slice(0, most));
  return { items: items.filter((item) => shown.has(item)), notListed: items.length - shown.size };
}

/** Of what a sign-off speaks: the sums of the month, and who carries what for which reason. */
export async function hashToSign(manager: EntityManager, month: Month, items: readonly OpenItem[]): Promise<string> {
  const sums = await periodRepository(manager).readSums(month);
  const carried = items
    .flatMap(({ key, carried: by }) => (by ? [{ key, carriedBy: by.personId, reason: by.reason }] : []))
    .sort((a, b) => (a.key < b.key ? -1 : 1));
  return sha256Hex(canonicalText({ sums, carried }));
}

/** Everything that is open at the end of a month, with whoever carries it: all of it, because a month closes over it. */
export async function readOpenItems(manager: EntityManager, month: Month, timeZone: string): Promise<OpenItem[]> {
  const open = openItemsRepository(manager);
  const span: MonthSpan = {
    month,
    start: new Date(startOfMonth(month, timeZone)),
    end: new Date(endOfMonth(month, timeZone) + 1),
  };
  const decisions = carriedOf(await open.carried(month), month);
  const differences = await readDifferences(manager, { from: null, to: month, standingOnly: true });
  return [
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
