import { z } from 'zod';
import { booksResponse, differenceItem } from '../books/books.schema.ts';
import { id, instant, month, shortText } from '../lists/list.schema.ts';
import { storedMass } from '../units/stored-mass.ts';
import { itemKey } from './item-key.ts';

/** `GET /periods`: months of the firm, the latest first. */
export const periodRow = z.strictObject({
  month,
  /** `next`: the one to close now. `over`: open, and it has to wait for the ones before. `running`: not over yet. */
  state: z.enum(['closed', 'next', 'over', 'running']),
  closedAt: instant.nullable(),
  closedByName: z.string().nullable(),
  entryCount: z.int(),
});
export type PeriodRow = z.output<typeof periodRow>;
export const periodsResponse = z.strictObject({
  firstOpenMonth: month.nullable(),
  /** The month to close now; null: none is over, or there is no entry. */
  next: month.nullable(),
  timeZone: z.string(),
  items: z.array(periodRow),
});
export type PeriodsResponse = z.output<typeof periodsResponse>;

/** By whom and why something open is carried on. */
export const carried = z.strictObject({
  month,
  personId: id,
  name: z.string(),
  reason: z.string(),
  decidedAt: instant,
});
export type Carried = z.output<typeof carried>;

const shared = {
  key: itemKey,
  /** The month cannot be closed before it is settled or carried. What the scales explain may stay as it is. */
  needsDecision: z.boolean(),
  /** For this month; null: nobody yet. */
  carried: carried.nullable(),
  /** For the latest month before. */
  carriedBefore: carried.nullable(),
};
export const openItem = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('difference'), ...shared, difference: differenceItem }),
  z.strictObject({
    kind: z.literal('weighIn'),
    ...shared,
    groupId: id,
    cylinderId: id,
    cylinderTag: z.string(),
    unitLabel: z.string().nullable(),
    startedAt: instant,
    timeZone: z.string(),
    startedByName: z.string(),
  }),
  z.strictObject({
    kind: z.literal('cylinder'),
    ...shared,
    cylinderId: id,
    cylinderTag: z.string(),
    refrigerant: z.string(),
    /** By its book at the end of the month. */
    contentG: z.number(),
    lastWeighedAt: instant.nullable(),
    heldByName: z.string().nullable(),
  }),
  z.strictObject({
    kind: z.literal('job'),
    ...shared,
    jobId: id,
    jobKind: z.string(),
    title: z.string().nullable(),
    unitId: id,
    unitLabel: z.string(),
    customerName: z.string(),
    openedAt: instant,
    closedAt: instant.nullable(),
  }),
]);
export type OpenItem = z.output<typeof openItem>;

/** What was settled of a month: entries of month close that stand. */
export const settledRow = z.strictObject({
  id,
  groupId: id,
  /** The statement whose difference it settles. */
  ofGroupId: id,
  label: z.string(),
  refrigerant: z.string(),
  /** Above zero: taken out of the difference. */
  massG: z.number(),
  to: z.strictObject({ place: z.string(), as: z.string().nullable(), label: z.string() }),
  byName: z.string(),
  at: instant,
  reason: z.string().nullable(),
});
export type SettledRow = z.output<typeof settledRow>;

export const checklistQuery = z.strictObject({ month });
/** `GET /periods/checklist`: what is open at the end of a month, and what became of it. */
export const checklist = z.strictObject({
  month,
  state: periodRow.shape.state,
  timeZone: z.string(),
  items: z.array(openItem),
  /** Items beyond what one list holds; those that wait for a decision are listed first. */
  notListed: z.int(),
  settled: z.array(settledRow),
  /** Of all items, listed or not: those that need a decision and have none, and those that somebody carries. */
  undecided: z.int(),
  carried: z.int(),
  /** Says of which sums and names the sign-off speaks: it is asked back. Of a closed month, as it was signed. */
  sumsHash: z.string().regex(/^[0-9a-f]{64}$/),
  equation: booksResponse.shape.equation,
  /** Of a closed month: who signed off, and what was carried. */
  signedOff: z
    .strictObject({
      at: instant,
      byName: z.string(),
      note: z.string().nullable(),
      carried: z.array(
        z.strictObject({ key: z.string(), label: z.string(), personId: id, name: z.string(), reason: z.string() }),
      ),
    })
    .nullable(),
});
export type Checklist = z.output<typeof checklist>;

/** What a difference turned out to be. A wrong tare is no settlement: revise the tare, and it is judged again. */
export const SETTLED_TO = ['atmosphere', 'supplier', 'missing'] as const;
export const settleRequest = z.strictObject({
  /** Of the settlement, and of the group that is posted. */
  id: z.uuidv7().toLowerCase(),
  month,
  key: itemKey,
  to: z.strictObject({ place: z.enum(SETTLED_TO), id: id.nullish() }),
  /** Left out: all of it that stands. */
  mass: storedMass.nullish(),
  reason: shortText(500),
});
export type SettleRequest = z.output<typeof settleRequest>;
export const settlementResponse = z.strictObject({
  id,
  groupId: id,
  key: itemKey,
  /** Above zero: taken out of the difference. */
  massG: z.number(),
});

export const carryRequest = z.strictObject({
  month,
  carriedBy: id,
  reason: shortText(500),
  items: z
    .array(z.strictObject({ id: z.uuidv7().toLowerCase(), key: itemKey }))
    .min(1)
    .max(500),
});
export type CarryRequest = z.output<typeof carryRequest>;
export const carryResponse = z.strictObject({ count: z.int() });

/** `POST /periods`: the owner signs the month off. There is no reopening. */
export const closeRequest = z.strictObject({
  id: z.uuidv7().toLowerCase(),
  month,
  /** As the checklist that was read told it. */
  sumsHash: z.string().regex(/^[0-9a-f]{64}$/),
  note: shortText(1_000).nullish(),
});
export type CloseRequest = z.output<typeof closeRequest>;
export const closeResponse = z.strictObject({
  id,
  month,
  firstOpenMonth: month,
  closedAt: instant,
  closedByName: z.string(),
  /** Of the record that was signed off, in the chain. */
  recordSequence: z.int(),
  /** The seal that covers it; null: it could not be sealed now, and the daily seal will. */
  seal: z.strictObject({ record: z.int(), hash: z.string(), keyId: z.string() }).nullable(),
});
export type CloseResponse = z.output<typeof closeResponse>;
