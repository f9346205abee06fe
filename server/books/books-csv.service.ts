import type { BooksCsvQuery, BooksPageQuery } from '../../shared/books/books.schema.ts';
import type { Actor } from '../http/actor.ts';
import { columnHead } from '../messages/column-heads.ts';
import { listCylinders, listJobs, listPeople, listPurchases, listSuppliers } from './book-lines.service.ts';
import { type BooksParts, getBooks, getDifferences } from './books.service.ts';
import { getCost } from './cost.service.ts';
import { type CsvCell, csvGrams, csvText } from './csv-table.ts';

type Row = Readonly<Record<string, unknown>>;

/** The columns of each table, in order: names of the API's fields, dotted where they lie deeper. */
const COLUMNS: Record<BooksCsvQuery['table'], readonly string[]> = {
  equation: ['side', 'part', 'massG', 'entryCount'],
  places: ['kind', 'startG', 'inG', 'outG', 'endG'],
  differences: ['kind', 'startG', 'shownG', 'settledG', 'endG'],
  items: [
    'at',
    'bookingMonth',
    'subject.kind',
    'subject.label',
    'kind',
    'refrigerant',
    'bookG',
    'scaleG',
    'differenceG',
    'settledG',
    'standsG',
    'twoUG',
    'verdict',
    'heldBetween',
    'recordedByName',
    'cost',
    'groupId',
  ],
  cylinders: ['tag', 'kind', 'refrigerant', 'heldByName', 'startG', 'inG', 'outG', 'differenceG', 'endG', 'cylinderId'],
  people: [
    'name',
    'van',
    'intoUnitsG',
    'recoveredG',
    'hoseG',
    'entryCount',
    'holdsG',
    'holdsCylinders',
    'chargedG',
    'chargedBeyondCount',
    'sharedG',
    'personId',
  ],
  suppliers: ['name', 'boughtG', 'purchaseCount', 'returnedG', 'shortFillG', 'withoutPriceG', 'paid', 'supplierId'],
  jobs: [
    'openedAt',
    'kind',
    'title',
    'unitLabel',
    'customerName',
    'siteName',
    'intoUnitG',
    'recoveredG',
    'chargedG',
    'cost',
    'jobId',
  ],
  cost: [
    'refrigerant',
    'startPerKg',
    'endPerKg',
    'startG',
    'startCost',
    'boughtG',
    'boughtCost',
    'withoutPriceG',
    'otherInG',
    'otherInCost',
    'intoUnitsG',
    'intoUnitsCost',
    'lostG',
    'lostCost',
    'differencesG',
    'differencesCost',
    'otherOutG',
    'otherOutCost',
    'endG',
    'endCost',
  ],
  purchases: [
    'occurredAt',
    'bookingMonth',
    'supplierName',
    'cylinderTags',
    'refrigerant',
    'massG',
    'documentNumber',
    'documentDate',
    'price.value',
    'price.per',
    'price.perKg',
    'cost',
    'groupId',
  ],
};
/** Tables with money carry its unit in a column of its own. */
const WITH_CURRENCY: ReadonlySet<BooksCsvQuery['table']> = new Set(['items', 'suppliers', 'jobs', 'cost', 'purchases']);

/** One table of the books as a file; lists whole, page by page. */
export async function booksCsv(parts: BooksParts, actor: Actor, query: BooksCsvQuery): Promise<string> {
  const { table, ...period } = query;
  const { rows, currency } = await tableOf(parts, actor, table, period);
  const money = WITH_CURRENCY.has(table) ? ['currency'] : [];
  return csvText(
    [...COLUMNS[table], ...money].map((name) => columnHead(name, actor.locale)),
    rows.map((row) => [...COLUMNS[table].map((column) => cellOf(row, column)), ...money.map(() => currency ?? '')]),
  );
}

async function tableOf(
  parts: BooksParts,
  actor: Actor,
  table: BooksCsvQuery['table'],
  period: Omit<BooksCsvQuery, 'table'>,
): Promise<{ rows: readonly Row[]; currency?: string }> {
  switch (table) {
    case 'equation': {
      const { equation } = await getBooks(parts, actor, period);
      const side = (name: string) => (part: Row) => ({ side: name, ...part });
      return { rows: [...equation.cameIn.map(side('in')), ...equation.wentOut.map(side('out'))] };
    }
    case 'places':
      return { rows: (await getBooks(parts, actor, period)).places };
    case 'differences':
      return { rows: (await getBooks(parts, actor, period)).differences };
    case 'items': {
      const { items, currency } = await getDifferences(parts, actor, period);
      return { rows: items, currency };
    }
    case 'people':
      return { rows: (await listPeople(parts, actor, period)).items };
    case 'suppliers': {
      const { items, currency } = await listSuppliers(parts, actor, period);
      return { rows: items, currency };
    }
    case 'cost': {
      const { rows, currency } = await getCost(parts, actor, period);
      return { rows, currency };
    }
    case 'cylinders':
      return everyPage((page) => listCylinders(parts, actor, page), period);
    case 'jobs':
      return everyPage((page) => listJobs(parts, actor, page), period);
    case 'purchases':
      return everyPage((page) => listPurchases(parts, actor, page), period);
  }
}

async function everyPage<Page extends { items: Row[]; nextCursor: string | null; currency?: string }>(
  read: (query: BooksPageQuery) => Promise<Page>,
  period: Omit<BooksCsvQuery, 'table'>,
): Promise<{ rows: Row[]; currency?: string }> {
  const rows: Row[] = [];
  let cursor: string | undefined;
  let currency: string | undefined;
  do {
    const page = await read({ ...period, limit: 200, cursor });
    rows.push(...page.items);
    cursor = page.nextCursor ?? undefined;
    currency = page.currency;
  } while (cursor !== undefined);
  return { rows, ...(currency === undefined ? {} : { currency }) };
}

function cellOf(row: Row, column: string): CsvCell {
  const value = column
    .split('.')
    .reduce<unknown>((inner, name) => (inner === null ? null : (inner as Row | undefined)?.[name]), row);
  if (value === null || value === undefined) return null;
  if (Array.isArray(value))
    return value.map((each) => (typeof each === 'string' ? each : (each.name ?? ''))).join('; ');
  if (typeof value === 'number') return column.endsWith('G') ? csvGrams(value) : value;
  return typeof value === 'boolean' ? value : String(value);
}
