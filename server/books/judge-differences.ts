import type { EntityManager } from 'typeorm';
import type { DifferenceItem } from '../../shared/books/books.schema.ts';
import { averageIn, worthOf } from '../../shared/books/cost.ts';
import { differenceKey } from '../../shared/periods/item-key.ts';
import { verdictOf as sizeVerdict } from '../../shared/scale/reconcile.ts';
import { statementFigures } from '../../shared/statements/statement-figures.ts';
import type { ReadingCheck } from '../../shared/statements/walk-cylinder.ts';
import { dayInZone } from '../../shared/units/calendar.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import { roundTo } from '../../shared/units/round.ts';
import { type Holders, readHolders } from '../statements/cylinder-holder.repository.ts';
import { type CylinderSpan, readBooksAtStart, readCylinderSteps } from '../statements/cylinder-steps.repository.ts';
import { rounded, twoU } from '../statements/statement-lines.ts';
import type { DifferenceRow } from './difference.repository.ts';

/** Average price a kilogram by refrigerant and month. */
export type Averages = ReadonlyMap<string, ReadonlyMap<string, number>>;

/**
 * Says of each difference what the scales make of it and whose hands it was in: a cylinder's by its very readings, a
 * unit's as the judge has found it; what a certificate names is no scale's.
 */
export async function judgeDifferences(
  manager: EntityManager,
  rows: readonly DifferenceRow[],
  averages: Averages,
): Promise<DifferenceItem[]> {
  const inCylinders = rows.filter(({ subjectKind }) => subjectKind === 'cylinder');
  const spans = spansOf(inCylinders);
  const steps = await readCylinderSteps(manager, spans);
  const books = await readBooksAtStart(manager, spans);
  const checks = new Map<string, ReadingCheck[]>();
  for (const { cylinderId, from } of spans) {
    const figures = statementFigures(steps.get(cylinderId) ?? [], books.get(cylinderId) ?? 0n, from.getTime());
    for (const check of figures.checks) {
      const key = `${cylinderId} ${check.groupId}`;
      checks.set(key, [...(checks.get(key) ?? []), check]);
    }
  }
  const holders = await readHolders(manager, [...new Set(inCylinders.map(({ subjectId }) => subjectId))]);
  return rows.map((row) =>
    itemOf(row, showing(checks.get(`${row.subjectId} ${row.groupId}`)), holders, averages.get(row.refrigerant)),
  );
}

/** The reading that shows the difference: the one for which something was posted, else the first of the group. */
const showing = (checks: readonly ReadingCheck[] | undefined): ReadingCheck | null =>
  checks?.find(({ postedMicrograms }) => postedMicrograms !== 0n) ?? checks?.[0] ?? null;

function spansOf(rows: readonly DifferenceRow[]): CylinderSpan[] {
  const spans = new Map<string, CylinderSpan>();
  for (const { subjectId, occurredAt } of rows) {
    const earlier = spans.get(subjectId);
    const after = new Date(occurredAt.getTime() + 1);
    spans.set(subjectId, {
      cylinderId: subjectId,
      from: !earlier || occurredAt < earlier.from ? occurredAt : earlier.from,
      to: !earlier || after > earlier.to ? after : earlier.to,
    });
  }
  return [...spans.values()];
}

function itemOf(
  row: DifferenceRow,
  check: ReadingCheck | null,
  holders: Holders,
  averages: ReadonlyMap<string, number> | undefined,
): DifferenceItem {
  const mass = BigInt(row.mass);
  const whole = BigInt(row.whole);
  const settled = BigInt(row.settled);
  const standsG = -gramsOfMicrograms(mass - settled);
  const perKg = averages ? averageIn(averages, row.bookingMonth) : null;
  const scaleG = check ? gramsOfMicrograms(check.contentMicrograms) : null;
  const at = row.occurredAt.toISOString();
  return {
    key: differenceKey(row),
    groupId: row.groupId,
    subject: { kind: row.subjectKind, id: row.subjectId, label: row.label },
    kind: row.kind,
    refrigerant: row.refrigerant,
    at: check ? new Date(check.at).toISOString() : at,
    timeZone: row.timeZone,
    bookingMonth: row.bookingMonth,
    differenceG: -gramsOfMicrograms(mass),
    readingDifferenceG: -gramsOfMicrograms(whole),
    settledG: -gramsOfMicrograms(settled),
    standsG,
    bookG: scaleG === null ? null : gramsOfMicrograms((check as ReadingCheck).contentMicrograms + whole),
    scaleG,
    standardUncertaintyG: check ? rounded(check.uncertainty.standardG) : null,
    twoUG: check ? twoU(check.uncertainty.standardG) : null,
    verdict: verdictOf(row, check, whole),
    statement: check && {
      from: dayInZone(check.previousAt ?? check.at, row.firmTimeZone),
      to: dayInZone(check.at, row.firmTimeZone),
    },
    previousAt: check?.previousAt ? new Date(check.previousAt).toISOString() : null,
    heldBetween: check
      ? holders.between(row.subjectId, check.previousAt, check.at)
      : [{ personId: row.recordedBy, name: row.recordedByName, van: null, from: at, to: at }],
    recordedByName: row.recordedByName,
    cost: perKg === null ? null : roundTo(0 - worthOf(standsG, perKg), 2),
  };
}

/** A cylinder's reading is of the whole, and so is what the scales make of it, whatever it is split into. */
function verdictOf(row: DifferenceRow, check: ReadingCheck | null, whole: bigint): DifferenceItem['verdict'] {
  if (row.kind === 'reclaimerDifference') return null;
  if (check) return sizeVerdict(Math.abs(gramsOfMicrograms(whole)), check.uncertainty.standardG);
  return row.flagged ? 'notExplained' : 'withinScales';
}
