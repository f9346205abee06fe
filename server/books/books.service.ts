import type { EntityManager } from 'typeorm';
import {
  type BooksQuery,
  type BooksResponse,
  type DifferenceItem,
  type DifferencesResponse,
  MOST_DIFFERENCES,
} from '../../shared/books/books.schema.ts';
import { monthlyAverages } from '../../shared/books/cost.ts';
import { equationOf } from '../../shared/books/equation.ts';
import { balancesOf, flowsOf } from '../../shared/books/flows.ts';
import { differencesOverPeriod, placesOverPeriod } from '../../shared/books/places.ts';
import { USUAL_CURRENCY } from '../../shared/periods/currency.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { readFirmMonths } from '../periods/firm-months.repository.ts';
import { type DifferenceSearch, findDifferences } from './difference.repository.ts';
import { type Averages, judgeDifferences } from './judge-differences.ts';
import { readPeriodSums } from './month-sum.repository.ts';
import { monthStocks, priceRepository, readStockFlows } from './price.repository.ts';

export type BooksParts = Pick<Parts, 'dataSource' | 'now' | 'newId'>;

/** The books of a period: from the sums by month alone. */
export function getBooks(parts: BooksParts, actor: Actor, query: BooksQuery): Promise<BooksResponse> {
  return inFirm(parts.dataSource, actor, (manager) => readBooks(manager, query));
}

export async function readBooks(manager: EntityManager, query: BooksQuery): Promise<BooksResponse> {
  const { firstOpenMonth } = await readFirmMonths(manager);
  const sums = await readPeriodSums(manager, query);
  const flows = flowsOf(sums.during);
  const equation = equationOf(flows, balancesOf(sums.before).get('cylinder') ?? 0n);
  const part = <Name>({ part: name, massMicrograms, entryCount }: { part: Name } & Counted) => {
    return { part: name, massG: gramsOfMicrograms(massMicrograms), entryCount };
  };
  return {
    from: query.from,
    to: query.to,
    refrigerant: query.refrigerant ?? null,
    refrigerants: sums.refrigerants,
    firstMonth: sums.firstMonth,
    lastMonth: sums.lastMonth,
    firstOpenMonth,
    equation: {
      cameIn: equation.cameIn.map(part),
      wentOut: equation.wentOut.map(part),
      totalG: gramsOfMicrograms(equation.totalMicrograms),
    },
    differences: differencesOverPeriod(sums.before, flows).map((row) => ({
      kind: row.kind,
      startG: gramsOfMicrograms(row.startMicrograms),
      shownG: gramsOfMicrograms(row.shownMicrograms),
      settledG: gramsOfMicrograms(row.settledMicrograms),
      endG: gramsOfMicrograms(row.endMicrograms),
    })),
    places: placesOverPeriod(sums.before, flows).map((row) => ({
      kind: row.kind,
      startG: gramsOfMicrograms(row.startMicrograms),
      inG: gramsOfMicrograms(row.inMicrograms),
      outG: gramsOfMicrograms(row.outMicrograms),
      endG: gramsOfMicrograms(row.endMicrograms),
    })),
  };
}

interface Counted {
  massMicrograms: bigint;
  entryCount: number;
}

export function getDifferences(parts: BooksParts, actor: Actor, query: BooksQuery): Promise<DifferencesResponse> {
  return inFirm(parts.dataSource, actor, async (manager) => {
    return readDifferences(manager, { ...query, standingOnly: false }, MOST_DIFFERENCES);
  });
}

/**
 * What is beyond the scales first.
 * @param most how many are listed; the sums are of all
 */
export async function readDifferences(
  manager: EntityManager,
  search: DifferenceSearch,
  most: number = Number.POSITIVE_INFINITY,
): Promise<DifferencesResponse> {
  const rows = await findDifferences(manager, search);
  const averages = await readAverages(manager, search.refrigerant);
  const all = (await judgeDifferences(manager, rows, averages)).sort(byVerdict);
  const sizeOf = (items: readonly DifferenceItem[]) => sum(items.map(({ standsG }) => Math.abs(standsG)));
  const size = (wanted: DifferenceItem['verdict']) => sizeOf(all.filter(({ verdict }) => verdict === wanted));
  const notListed = all.slice(most);
  return {
    items: all.slice(0, most),
    notListed: { count: notListed.length, massG: sizeOf(notListed) },
    totals: {
      notExplainedG: size('notExplained'),
      lookAgainG: size('lookAgain'),
      withinScalesG: size('withinScales'),
      byCertificateG: size(null),
      settledG: sum(all.map(({ settledG }) => Math.abs(settledG))),
    },
    currency: await readCurrency(manager),
  };
}

const RANK = { notExplained: 0, lookAgain: 1, byCertificate: 2, withinScales: 3 } as const;
const rankOf = ({ verdict, standsG }: DifferenceItem): number => (standsG === 0 ? 4 : RANK[verdict ?? 'byCertificate']);
const byVerdict = (a: DifferenceItem, b: DifferenceItem): number =>
  rankOf(a) - rankOf(b) || Math.abs(b.standsG) - Math.abs(a.standsG) || (a.at < b.at ? -1 : 1);

/** Grams added up without the noise of doubles: each is a whole number of micrograms. */
const exact = (massG: number): number => Math.round(massG * 1e6) / 1e6;
const sum = (masses: readonly number[]): number => exact(masses.reduce((total, mass) => total + mass, 0));

/** Average prices by refrigerant and month; none is worked out while nobody has given a price. */
export async function readAverages(manager: EntityManager, refrigerant?: string): Promise<Averages> {
  if (!(await priceRepository(manager).hasAny())) return new Map();
  const stocks = monthStocks(await readStockFlows(manager, refrigerant));
  return new Map([...stocks].map(([name, months]) => [name, monthlyAverages(months)]));
}

/** That of the first price, else the usual one where the firm is. */
export async function readCurrency(manager: EntityManager): Promise<string> {
  const given = await priceRepository(manager).findCurrency();
  return given ?? USUAL_CURRENCY[(await readFirmMonths(manager)).jurisdiction];
}
