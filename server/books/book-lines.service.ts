import type { z } from 'zod';
import type {
  BooksPageQuery,
  BooksQuery,
  CylinderBook,
  JobBook,
  PersonBook,
  PurchaseRow,
  purchasePage,
  SupplierBook,
} from '../../shared/books/books.schema.ts';
import { averageIn, worthOf } from '../../shared/books/cost.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import { roundTo } from '../../shared/units/round.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import {
  type JobSums,
  listCylinderBooks,
  listJobSums,
  listPurchaseSums,
  type PurchaseSums,
  readPersonSums,
  readSupplierSums,
} from './book-lines.repository.ts';
import { type BooksParts, readAverages, readCurrency, readDifferences } from './books.service.ts';
import type { Averages } from './judge-differences.ts';

type PageOf<Item> = { items: Item[]; nextCursor: string | null };

export function listCylinders(parts: BooksParts, actor: Actor, query: BooksPageQuery): Promise<PageOf<CylinderBook>> {
  return inFirm(parts.dataSource, actor, (manager) => listCylinderBooks(manager, query));
}

/**
 * Who moved what, who holds what, and what differed while it was in their hands. What was in several hands is charged to
 * none of them: no reading says in whose it went, and charged to each, the sum would be more than is missing.
 */
export function listPeople(parts: BooksParts, actor: Actor, query: BooksQuery): Promise<{ items: PersonBook[] }> {
  return inFirm(parts.dataSource, actor, async (manager) => {
    const people = await readPersonSums(manager, query);
    const { items } = await readDifferences(manager, { ...query, standingOnly: true });
    const ofCylinders = items
      .filter(({ subject }) => subject.kind === 'cylinder')
      .map((item) => ({ ...item, hands: new Set(item.heldBetween.flatMap(({ personId }) => personId ?? [])) }));
    return {
      items: people.flatMap((person) => {
        const held = ofCylinders.filter(({ hands }) => hands.has(person.personId));
        const alone = held.filter(({ hands }) => hands.size === 1);
        if (person.entryCount === 0 && person.holdsCylinders === 0 && held.length === 0) return [];
        return {
          ...person,
          chargedG: standing(alone),
          chargedBeyondCount: alone.filter(({ verdict }) => verdict === 'notExplained').length,
          sharedG: standing(held.filter(({ hands }) => hands.size > 1)),
        };
      }),
    };
  });
}

const standing = (items: readonly { standsG: number }[]): number =>
  roundTo(
    items.reduce((sum, { standsG }) => sum + standsG, 0),
    6,
  );

export function listSuppliers(
  parts: BooksParts,
  actor: Actor,
  query: BooksQuery,
): Promise<{ items: SupplierBook[]; currency: string }> {
  return inFirm(parts.dataSource, actor, async (manager) => ({
    items: (await readSupplierSums(manager, query)).map(({ paidMicros, ...row }) => ({
      ...row,
      paid: roundTo(paidMicros / 1e6, 2),
    })),
    currency: await readCurrency(manager),
  }));
}

export function listJobs(
  parts: BooksParts,
  actor: Actor,
  query: BooksPageQuery,
): Promise<PageOf<JobBook> & { currency: string }> {
  return inFirm(parts.dataSource, actor, async (manager) => {
    const averages = await readAverages(manager, query.refrigerant);
    const page = await listJobSums(manager, query, (row) => jobOf(row, averages));
    return { ...page, currency: await readCurrency(manager) };
  });
}

function jobOf({ intoUnit, recovered, charged, ...row }: JobSums, averages: Averages): JobBook {
  const costs = charged.map(({ month, refrigerant, mass }) => {
    const perKg = averageIn(averages.get(refrigerant) ?? new Map(), month);
    return perKg === null ? null : worthOf(gramsOfMicrograms(BigInt(mass)), perKg);
  });
  const isKnown = costs.every((cost) => cost !== null);
  return {
    jobId: row.jobId,
    kind: row.kind,
    title: row.title,
    openedAt: row.openedAt.toISOString(),
    unitId: row.unitId,
    unitLabel: row.unitLabel,
    customerName: row.customerName,
    siteName: row.siteName,
    intoUnitG: gramsOfMicrograms(BigInt(intoUnit)),
    recoveredG: gramsOfMicrograms(BigInt(recovered)),
    chargedG: gramsOfMicrograms(charged.reduce((sum, { mass }) => sum + BigInt(mass), 0n)),
    cost: isKnown
      ? roundTo(
          costs.reduce<number>((sum, cost) => sum + (cost ?? 0), 0),
          2,
        )
      : null,
  };
}

export function listPurchases(
  parts: BooksParts,
  actor: Actor,
  query: BooksPageQuery,
): Promise<z.output<typeof purchasePage>> {
  return inFirm(parts.dataSource, actor, async (manager) => ({
    ...(await listPurchaseSums(manager, query, purchaseOf)),
    currency: await readCurrency(manager),
  }));
}

function purchaseOf({ mass, price, ...row }: PurchaseSums): PurchaseRow {
  const massG = gramsOfMicrograms(BigInt(mass));
  const perKg = price ? Number(price.microsPerKg) / 1e6 : null;
  return {
    groupId: row.groupId,
    refrigerant: row.refrigerant,
    massG,
    occurredAt: row.occurredAt.toISOString(),
    bookingMonth: row.bookingMonth,
    supplierName: row.supplierName,
    cylinderTags: row.cylinderTags,
    documentNumber: row.documentNumber,
    documentDate: row.documentDate,
    price:
      price && perKg !== null
        ? { value: price.value, per: price.per, perKg, givenAt: new Date(price.givenAt).toISOString() }
        : null,
    cost: perKg === null ? null : roundTo(worthOf(massG, perKg), 2),
  };
}
