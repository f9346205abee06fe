import { z } from 'zod';
import { placeView } from '../entries/entry.schema.ts';
import { flagResponse, postedEntryResponse, warningResponse } from '../ledger/entry-group-response.schema.ts';

/** An entry as it would be posted: without the sequence and the time of recording, which only a posting gives. */
export const previewedEntry = postedEntryResponse
  .omit({ sequence: true, recordedAt: true })
  .extend({ from: placeView, to: placeView });
export type PreviewedEntry = z.output<typeof previewedEntry>;

/** Grams of a refrigerant in a cylinder or unit before and after everything that would be posted. */
export const previewedBalance = z.strictObject({
  place: placeView,
  refrigerant: z.string(),
  beforeG: z.number(),
  afterG: z.number(),
  /** False for a unit whose book is not known: the masses are then only the sum of what was weighed. */
  known: z.boolean(),
});
export type PreviewedBalance = z.output<typeof previewedBalance>;

/** Is the unit full now? Asked where the book is not known or would pass full charge by more than the scales explain. */
export const previewedQuestion = z.strictObject({
  asks: z.literal('howFull'),
  unitId: z.uuid(),
  /** The book before this group; null where it is not known. */
  bookG: z.number().nullable(),
  /** Null where it has not been determined. */
  fullChargeG: z.number().nullable(),
});
export type PreviewedQuestion = z.output<typeof previewedQuestion>;

/** A reason that the posting asks for, with the path of the request where it belongs. */
export const previewedReason = z.strictObject({
  code: z.string(),
  path: z.string(),
  message: z.string(),
  given: z.unknown().optional(),
  allowed: z.unknown().optional(),
});
export type PreviewedReason = z.output<typeof previewedReason>;

/** Answer of `POST /entry-groups/preview` and of a reversal's: what a posting of this body would do. Nothing is kept. */
export const entryPreviewResponse = z.strictObject({
  entries: z.array(previewedEntry),
  balances: z.array(previewedBalance),
  /** Flags that this group would open. */
  flags: z.array(flagResponse),
  warnings: z.array(warningResponse),
  questions: z.array(previewedQuestion),
  reasons: z.array(previewedReason),
});
export type EntryPreviewResponse = z.output<typeof entryPreviewResponse>;
