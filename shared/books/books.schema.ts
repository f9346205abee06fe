import { z } from 'zod';
import { day, id, instant, month, pageOf, pageQuery } from '../lists/list.schema.ts';
import { holder, verdict } from '../statements/cylinder-statement.schema.ts';
import { CAME_IN, WENT_OUT } from './equation.ts';
import { DIFFERENCE_KINDS } from './flows.ts';
import { BOOK_KINDS } from './places.ts';

/** Longest period of the books: ten years. */
export const MOST_MONTHS = 120;

const refrigerantName = z.string().max(20);
const periodFields = {
  /** First and last booking month, both included. */
  from: month,
  to: month,
  /** One refrigerant; left out: all together. */
  refrigerant: refrigerantName.optional(),
};

/** A period in its right order, and not without end. */
export const ofPeriod = <T extends z.ZodType<{ from: string; to: string }>>(schema: T) =>
  schema.superRefine(({ from, to }, ctx) => {
    if (from > to) {
      ctx.addIssue({
        code: 'custom',
        path: ['to'],
        message: 'backwards',
        params: { code: 'periodBackwards', allowed: from },
      });
    } else if (monthsApart(from, to) >= MOST_MONTHS) {
      const params = { code: 'periodTooLong', allowed: MOST_MONTHS };
      ctx.addIssue({ code: 'custom', path: ['to'], message: 'too long', params });
    }
  });

function monthsApart(from: string, to: string): number {
  const count = (text: string) => Number(text.slice(0, 4)) * 12 + Number(text.slice(5, 7));
  return count(to) - count(from);
}

export const booksQuery = ofPeriod(z.strictObject(periodFields));
export type BooksQuery = z.output<typeof booksQuery>;

const part = <Names extends readonly [string, ...string[]]>(names: Names) =>
  z.strictObject({ part: z.enum(names), massG: z.number(), entryCount: z.int() });

/** `GET /books`: from the sums that posting keeps, so that it is as fast for a year as for a day. */
export const booksResponse = z.strictObject({
  from: month,
  to: month,
  refrigerant: z.string().nullable(),
  /** Those of which the firm has entries, the ones with most on hand first. */
  refrigerants: z.array(z.string()),
  firstMonth: month.nullable(),
  lastMonth: month.nullable(),
  firstOpenMonth: month.nullable(),
  /** The cylinders' side: what was there and came in is what went out and is there. */
  equation: z.strictObject({
    cameIn: z.array(part(CAME_IN)),
    wentOut: z.array(part(WENT_OUT)),
    totalG: z.number(),
  }),
  /** Each kind of difference by itself, so that none can hide another. */
  differences: z.array(
    z.strictObject({
      kind: z.enum(DIFFERENCE_KINDS),
      startG: z.number(),
      shownG: z.number(),
      settledG: z.number(),
      endG: z.number(),
    }),
  ),
  /** Every kind of place; the ends of all come to nothing. */
  places: z.array(
    z.strictObject({
      kind: z.enum(BOOK_KINDS as unknown as readonly [string, ...string[]]),
      startG: z.number(),
      inG: z.number(),
      outG: z.number(),
      endG: z.number(),
    }),
  ),
});
export type BooksResponse = z.output<typeof booksResponse>;

/** What a difference was judged in. */
export const DIFFERENCE_SUBJECTS = ['cylinder', 'unit', 'reclaimer'] as const;
/** The most differences of one list: beyond the scales first, then the largest; the rest is counted. */
export const MOST_DIFFERENCES = 200;

/** What one statement (a reading, an empty unit, a certificate) shows against the book. */
export const differenceItem = z.strictObject({
  /** Names it for settling and carrying. */
  key: z.string(),
  groupId: id,
  subject: z.strictObject({ kind: z.enum(DIFFERENCE_SUBJECTS), id, label: z.string() }),
  kind: z.enum(DIFFERENCE_KINDS),
  refrigerant: z.string(),
  at: instant,
  timeZone: z.string(),
  /** Of the group, while its month was open. */
  bookingMonth: month,
  /** Reading less book: below zero, refrigerant is missing. What was explained since is taken off. */
  differenceG: z.number(),
  /** Of all refrigerants in the cylinder together, as it was weighed: the verdict is of this. */
  readingDifferenceG: z.number(),
  /** Made something else by month close: lost, the supplier's, missing. */
  settledG: z.number(),
  /** What still stands as a difference. */
  standsG: z.number(),
  /** By the reading, for a cylinder. */
  bookG: z.number().nullable(),
  scaleG: z.number().nullable(),
  standardUncertaintyG: z.number().nullable(),
  twoUG: z.number().nullable(),
  /** Null: named by a certificate, and no scale of ours was asked. */
  verdict: verdict.nullable(),
  previousAt: instant.nullable(),
  /** A cylinder's statement over the two readings: first and last day, by the firm's clock as statements have them. */
  statement: z.strictObject({ from: day, to: day }).nullable(),
  /** A cylinder: who held it between the two readings. Else whoever recorded the group. */
  heldBetween: z.array(holder),
  recordedByName: z.string(),
  /** Of what stands, at the average price of the booking month; below zero for a surplus; null: no price is known. */
  cost: z.number().nullable(),
});
export type DifferenceItem = z.output<typeof differenceItem>;

export const differencesResponse = z.strictObject({
  /** Beyond the scales first, the largest first. */
  items: z.array(differenceItem),
  /** Those that were left out of the list; they are in the totals. */
  notListed: z.strictObject({ count: z.int(), massG: z.number() }),
  /** Sizes added up, of what stands, by verdict. */
  totals: z.strictObject({
    notExplainedG: z.number(),
    lookAgainG: z.number(),
    withinScalesG: z.number(),
    byCertificateG: z.number(),
    settledG: z.number(),
  }),
  currency: z.string(),
});
export type DifferencesResponse = z.output<typeof differencesResponse>;

const pagedPeriod = pageQuery.extend(periodFields);
export const booksPageQuery = ofPeriod(pagedPeriod);
export type BooksPageQuery = z.output<typeof booksPageQuery>;

export const cylinderBook = z.strictObject({
  cylinderId: id,
  tag: z.string(),
  kind: z.string(),
  refrigerant: z.string(),
  heldByName: z.string().nullable(),
  startG: z.number(),
  inG: z.number(),
  outG: z.number(),
  /** Net, reading less book. */
  differenceG: z.number(),
  endG: z.number(),
});
export const cylinderBookPage = pageOf(cylinderBook);
export type CylinderBook = z.output<typeof cylinderBook>;

export const personBook = z.strictObject({
  personId: id,
  name: z.string(),
  van: z.string().nullable(),
  /** By entries that this person recorded. */
  intoUnitsG: z.number(),
  recoveredG: z.number(),
  hoseG: z.number(),
  entryCount: z.int(),
  /** In cylinders that this person holds now. */
  holdsG: z.number(),
  holdsCylinders: z.int(),
  /** Differences of cylinders that were in these hands alone between the two readings. */
  chargedG: z.number(),
  chargedBeyondCount: z.int(),
  /** Of cylinders that others held too between the two readings: told of each of them, and no sum over people. */
  sharedG: z.number(),
});
export const peopleBooks = z.strictObject({ items: z.array(personBook) });
export type PersonBook = z.output<typeof personBook>;

export const supplierBook = z.strictObject({
  supplierId: id,
  name: z.string(),
  boughtG: z.number(),
  purchaseCount: z.int(),
  returnedG: z.number(),
  /** Shown at the first weighing of what came from this supplier; above zero: less was in it than the paper said. */
  shortFillG: z.number(),
  /** Bought with no price given yet. */
  withoutPriceG: z.number(),
  paid: z.number(),
});
export const supplierBooks = z.strictObject({ items: z.array(supplierBook), currency: z.string() });
export type SupplierBook = z.output<typeof supplierBook>;

export const jobBook = z.strictObject({
  jobId: id,
  kind: z.string(),
  title: z.string().nullable(),
  openedAt: instant,
  unitId: id,
  unitLabel: z.string(),
  customerName: z.string(),
  siteName: z.string(),
  intoUnitG: z.number(),
  recoveredG: z.number(),
  /** Of ours, out of cylinders that are bought into: what is billed. */
  chargedG: z.number(),
  /** Null: no price is known. */
  cost: z.number().nullable(),
});
export const jobBookPage = pageOf(jobBook).extend({ currency: z.string() });
export type JobBook = z.output<typeof jobBook>;

/** Weighted average of the booking month: see `shared/books/cost.ts`. */
export const COST_METHOD = 'monthlyWeightedAverage' as const;

export const costRow = z.strictObject({
  refrigerant: z.string(),
  /** Price a kilogram at the start of the period and at its end; null: none is known. */
  startPerKg: z.number().nullable(),
  endPerKg: z.number().nullable(),
  startG: z.number(),
  startCost: z.number(),
  boughtG: z.number(),
  boughtCost: z.number(),
  /** Bought with no price given yet: taken at the average. */
  withoutPriceG: z.number(),
  /** What came in otherwise: openings, back from units, found, out of recovery cylinders; at the average. */
  otherInG: z.number(),
  otherInCost: z.number(),
  intoUnitsG: z.number(),
  intoUnitsCost: z.number(),
  /** Lost from cylinders: hoses, and what month close made lost is in `differences` until then. */
  lostG: z.number(),
  lostCost: z.number(),
  /** Differences and missing, net. */
  differencesG: z.number(),
  differencesCost: z.number(),
  /** Returned, sent off, given away, into recovery cylinders. */
  otherOutG: z.number(),
  otherOutCost: z.number(),
  endG: z.number(),
  endCost: z.number(),
});
export const costResponse = z.strictObject({
  method: z.literal(COST_METHOD),
  currency: z.string(),
  rows: z.array(costRow),
});
export type CostRow = z.output<typeof costRow>;

export const purchaseRow = z.strictObject({
  groupId: id,
  refrigerant: z.string(),
  massG: z.number(),
  occurredAt: instant,
  bookingMonth: month,
  supplierName: z.string(),
  cylinderTags: z.array(z.string()),
  documentNumber: z.string().nullable(),
  documentDate: day.nullable(),
  price: z
    .strictObject({ value: z.string(), per: z.enum(['kg', 'lb']), perKg: z.number(), givenAt: instant })
    .nullable(),
  cost: z.number().nullable(),
});
export const purchasePage = pageOf(purchaseRow).extend({ currency: z.string() });
export type PurchaseRow = z.output<typeof purchaseRow>;

export const addPriceRequest = z.strictObject({
  id: z.uuidv7().toLowerCase(),
  groupId: id,
  refrigerant: refrigerantName,
  price: z.strictObject({
    /** A decimal with a point, of the firm's currency. */
    value: z.string().regex(/^\d{1,7}(\.\d{1,6})?$/),
    per: z.enum(['kg', 'lb']),
  }),
  /** ISO 4217. Left out: the firm's. The first price decides which that is. */
  currency: z
    .string()
    .regex(/^[A-Z]{3}$/)
    .nullish(),
});
export type AddPriceRequest = z.output<typeof addPriceRequest>;
export const priceResponse = z.strictObject({
  id,
  groupId: id,
  refrigerant: z.string(),
  value: z.string(),
  per: z.enum(['kg', 'lb']),
  currency: z.string(),
  perKg: z.number(),
  givenAt: instant,
});

/** Tables of the books that can be taken out. */
export const BOOK_TABLES = [
  'equation',
  'places',
  'differences',
  'items',
  'cylinders',
  'people',
  'suppliers',
  'jobs',
  'cost',
  'purchases',
] as const;
export const booksCsvQuery = ofPeriod(z.strictObject({ ...periodFields, table: z.enum(BOOK_TABLES) }));
export type BooksCsvQuery = z.output<typeof booksCsvQuery>;
