import { z } from 'zod';
import { placeSchema } from './entry-group.schema.ts';

/** Grams with up to six decimals: a whole number of micrograms. */
const massG = z.number();
const instant = z.iso.datetime({ offset: true });

export const postedEntryResponse = z.strictObject({
  id: z.uuid(),
  groupId: z.uuid(),
  sequence: z.int(),
  refrigerant: z.string(),
  massG: massG.positive(),
  from: placeSchema,
  to: placeSchema,
  howKnown: z.string().nullable(),
  occurredAt: instant,
  recordedAt: instant,
  bookingMonth: z.string().regex(/^\d{4}-\d{2}$/),
  /** Booked in a later month than it occurred in, because that month was closed. */
  late: z.boolean(),
  addedByServer: z.boolean(),
  /** The loss is at least this much: the unit was left not full. */
  atLeast: z.boolean(),
  correctsGroupId: z.uuid().nullable(),
});
export type PostedEntryResponse = z.output<typeof postedEntryResponse>;

export const balanceResponse = z.strictObject({
  place: placeSchema,
  refrigerant: z.string(),
  massG,
  /** False for a unit whose book is not known: `massG` is then only the sum of what was weighed. */
  known: z.boolean(),
});
export type BalanceResponse = z.output<typeof balanceResponse>;

export const flagResponse = z.strictObject({
  code: z.string(),
  subject: placeSchema,
  groupId: z.uuid(),
  refrigerant: z.string().nullable(),
  massG: massG.nullable(),
  message: z.string(),
  openedBy: z.uuid(),
  closedBy: z.uuid().nullable(),
});
export type FlagResponse = z.output<typeof flagResponse>;

export const warningResponse = z.strictObject({ code: z.string(), message: z.string() });

/** Answer of `POST /entry-groups`, its reversal and its answer: 201, and 200 for a resend of the same content. */
export const entryGroupResponse = z.strictObject({
  entries: z.array(postedEntryResponse),
  balances: z.array(balanceResponse),
  flags: z.array(flagResponse),
  warnings: z.array(warningResponse),
});
export type EntryGroupResponse = z.output<typeof entryGroupResponse>;
