import { z } from 'zod';
import { placeView } from '../entries/entry.schema.ts';
import { GROUP_KINDS, READING_MODES, READING_MOMENTS } from '../ledger/entry-group.schema.ts';
import { day, id, instant, month } from '../lists/list.schema.ts';

/** The three words for a difference: below 2 u, up to and with 3 u, beyond. */
export const VERDICTS = ['withinScales', 'lookAgain', 'notExplained'] as const;
export const verdict = z.enum(VERDICTS);

/** Longest period of one statement, in days, and most entries in it: a longer history is several statements. */
export const STATEMENT_LIMITS = { days: 1_100, entries: 2_000 } as const;

export const statementQuery = z
  .strictObject({
    /** First and last day, both included, in the firm's zone. Left out: from the first of this month to today. */
    from: day.optional(),
    to: day.optional(),
  })
  .superRefine(({ from, to }, ctx) => {
    if (!from || !to || from <= to) return;
    ctx.addIssue({
      code: 'custom',
      path: ['to'],
      message: 'backwards',
      params: { code: 'periodBackwards', allowed: from },
    });
  });
export type StatementQuery = z.output<typeof statementQuery>;

/** Who held the cylinder for a while; null: assigned to nobody. */
export const holder = z.strictObject({
  personId: id.nullable(),
  name: z.string().nullable(),
  van: z.string().nullable(),
  from: instant,
  to: instant,
});
export type Holder = z.output<typeof holder>;

const scaleFigures = z.strictObject({
  resolutionG: z.number(),
  repeatabilityG: z.number(),
  spanErrorRelative: z.number(),
  offsetG: z.number(),
  /** Nobody named the scale: 5 g steps stand for it. */
  assumed: z.boolean(),
});

const difference = {
  /** Reading less book: below zero, refrigerant is missing. */
  differenceG: z.number(),
  standardUncertaintyG: z.number(),
  /** Twice the standard uncertainty: the limit within which the scales explain it. */
  twoUG: z.number(),
  independentReadings: z.int(),
  /** Readings that end one weighing and start the next: left out of n. */
  sharedReadings: z.int(),
  /** Masses in between that no scale vouches for. */
  notWeighed: z.int(),
  verdict,
};

export const statementEntryLine = z.strictObject({
  line: z.literal('entry'),
  id,
  groupId: id,
  sequence: z.int(),
  at: instant,
  kind: z.enum(GROUP_KINDS),
  refrigerant: z.string(),
  /** Above zero: into the cylinder. */
  massG: z.number(),
  /** After this line, all refrigerants together. */
  balanceG: z.number(),
  /** The other end. */
  counter: placeView,
  howKnown: z.string().nullable(),
  addedByServer: z.boolean(),
  correctsGroupId: id.nullable(),
  /** Its group was reversed, or it is the reversal: both lines together are nothing. */
  cancelled: z.boolean(),
  late: z.boolean(),
  bookingMonth: month,
  recordedByName: z.string(),
});

export const statementReadingLine = z.strictObject({
  line: z.literal('reading'),
  id,
  groupId: id,
  at: instant,
  moment: z.enum(READING_MOMENTS),
  mode: z.enum(READING_MODES),
  value: z.string(),
  unit: z.string(),
  grossG: z.number(),
  toolName: z.string().nullable(),
  resolutionG: z.number().nullable(),
  /** Net content that it states; null for a zeroed reading or one of a reversed group. */
  contentG: z.number().nullable(),
  /** Against the book of its moment; null where it states nothing, or opens the book. */
  differenceG: z.number().nullable(),
  twoUG: z.number().nullable(),
  verdict: verdict.nullable(),
  cancelled: z.boolean(),
  recordedByName: z.string(),
});
export const statementLine = z.discriminatedUnion('line', [statementEntryLine, statementReadingLine]);
export type StatementLine = z.output<typeof statementLine>;

/** `GET /cylinders/{id}/statement`: like a bank's, with the scale as the other side. By the time it happened. */
export const cylinderStatement = z.strictObject({
  cylinder: z.strictObject({
    id,
    tag: z.string(),
    kind: z.string(),
    refrigerant: z.string(),
    tareG: z.number(),
    heldByName: z.string().nullable(),
  }),
  firmName: z.string(),
  from: day,
  to: day,
  timeZone: z.string(),
  openingG: z.number(),
  /** Masses in and out, without what was cancelled and without differences. */
  cameInG: z.number(),
  wentOutG: z.number(),
  /** Opened by a first reading or by hand. */
  openedG: z.number(),
  /** What readings added to the book or took from it. */
  differencesG: z.number(),
  closingG: z.number(),
  closingByRefrigerant: z.array(z.strictObject({ refrigerant: z.string(), massG: z.number() })),
  lines: z.array(statementLine),
  /** The last gross reading of the period; null: it was not weighed. */
  lastReading: z
    .strictObject({
      at: instant,
      groupId: id,
      grossG: z.number(),
      tareG: z.number(),
      contentG: z.number(),
      toolName: z.string().nullable(),
      scale: scaleFigures,
      /** What the book should have been there: opening and masses, nothing that a reading added. */
      expectedG: z.number(),
    })
    .nullable(),
  /** Over the whole period, against the last reading; null without one, or where it opened the book. */
  difference: z
    .strictObject({
      ...difference,
      /** The reading that the opening rests on; null: a paper. */
      restsOnAt: instant.nullable(),
    })
    .nullable(),
  /** Each difference within the period, with the readings that show it and who held the cylinder between them. */
  differences: z.array(
    z.strictObject({
      groupId: id,
      at: instant,
      previousAt: instant.nullable(),
      bookG: z.number(),
      scaleG: z.number(),
      ...difference,
      /** Whether the book follows the reading; within the scales it stays. */
      posted: z.boolean(),
      heldBetween: z.array(holder),
    }),
  ),
  weighedBefore: instant.nullable(),
});
export type CylinderStatement = z.output<typeof cylinderStatement>;

export const STATEMENT_CSV_COLUMNS = [
  'at',
  'line',
  'kind',
  'refrigerant',
  'massG',
  'balanceG',
  'counterPlace',
  'counter',
  'howKnown',
  'grossG',
  'contentG',
  'differenceG',
  'twoUG',
  'verdict',
  'cancelled',
  'late',
  'bookingMonth',
  'addedByServer',
  'recordedBy',
  'groupId',
  'id',
] as const;
