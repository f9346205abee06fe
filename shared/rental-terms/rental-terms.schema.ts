import { z } from 'zod';
import { day, id } from '../lists/list.schema.ts';

/** An amount of money as typed: no sign, at most four decimals. */
export const amountText = z.string().regex(/^\d{1,9}(\.\d{1,4})?$/);
/** ISO 4217. */
export const currencyCode = z.string().regex(/^[A-Z]{3}$/);

/** What the owner of a rented cylinder asks for it, from a day on. */
export const rentalConditions = z.strictObject({
  /** Paid back when the cylinder comes back; null: none. */
  deposit: amountText.nullable(),
  /** For each day; null: none. */
  dailyRate: amountText.nullable(),
  currency: currencyCode,
});

export const addRentalTermsRequest = z.strictObject({
  id,
  since: day,
  /** Null: it was given back on that day. */
  conditions: rentalConditions.nullable(),
});
export type AddRentalTermsRequest = z.output<typeof addRentalTermsRequest>;

export const rentalTerms = addRentalTermsRequest;
export type RentalTerms = z.output<typeof rentalTerms>;

export const rentalSoFar = z.strictObject({
  /** The day it came. */
  since: day,
  /** Up to and with today; the day it came counts, the day it goes back does not. */
  days: z.int().nonnegative(),
  conditions: rentalConditions,
  /** Daily rates times their days, for each currency. */
  costs: z.array(z.strictObject({ amount: z.string(), currency: currencyCode })),
});
export type RentalSoFar = z.output<typeof rentalSoFar>;

export const rentalView = z.strictObject({
  /** By their days, the earliest first. */
  items: z.array(rentalTerms),
  /** Null: it is not rented, or its rental begins later. */
  rental: rentalSoFar.nullable(),
});
export type RentalView = z.output<typeof rentalView>;
