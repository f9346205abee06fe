import { z } from 'zod';

/** UUID version 7 (RFC 9562): made by the client, ordered by time. Ids made by the server are of the same kind. */
export const id = z.uuid().toLowerCase();

/** Years that machines and records of this trade can be of; PostgreSQL and calendars agree on them. */
export const CALENDAR = { first: '1900-01-01', last: '2199-12-31' } as const;
export const isInCalendar = (dayOrInstant: string): boolean => {
  const day = dayOrInstant.slice(0, 10);
  return day >= CALENDAR.first && day <= CALENDAR.last;
};
const OUT_OF_CALENDAR = { code: 'outOfCalendar', allowed: [CALENDAR.first, CALENDAR.last], params: CALENDAR };

/** An instant with its offset (RFC 3339). */
export const instant = z.iso.datetime({ offset: true }).refine(isInCalendar, { params: OUT_OF_CALENDAR });
/** A calendar day at the place it speaks of. */
export const day = z.iso.date().refine(isInCalendar, { params: OUT_OF_CALENDAR });
/** A booking month, `2026-11`. */
export const month = z.string().regex(/^\d{4}-(0[1-9]|1[0-2])$/);

/** A decimal as a person typed it: no exponent, point as separator, at most 12 digits before and 9 after it. */
export const decimalText = z.string().regex(/^-?\d{1,12}(\.\d{1,9})?$/);

export const shortText = (max: number) => z.string().trim().min(1).max(max);

/** Keyset pages: `cursor` is opaque and belongs to one sort and filter. */
export const pageQuery = z.strictObject({
  cursor: z.string().max(500).optional(),
  limit: z.coerce.number().int().min(1).max(200).default(50),
});

export type PageQuery = z.output<typeof pageQuery>;

export const pageOf = <T extends z.ZodType>(item: T) =>
  z.strictObject({ items: z.array(item), nextCursor: z.string().nullable() });

/** Words that all have to stand somewhere in what is searched: `mill 0412`. */
export const searchText = z.string().trim().min(1).max(100);
/** `true` or `false` in a query string. */
export const flagText = z.enum(['true', 'false']).transform((text) => text === 'true');
