import { z } from 'zod';
import { GROUP_KINDS, READING_MODES, READING_MOMENTS } from '../ledger/entry-group.schema.ts';
import { FLAG_CODES } from '../ledger/flag.ts';
import { PLACE_KINDS } from '../ledger/place.ts';
import { recoveryLevel } from '../ledger/recovery-level.schema.ts';
import { flagText, id, instant, month, pageOf, pageQuery } from '../lists/list.schema.ts';

/** One end of an entry as lists show it: the place and the words a person knows it by. */
export const placeView = z.strictObject({
  place: z.string(),
  id: id.nullable(),
  as: z.string().nullable(),
  label: z.string(),
});

export const entryRow = z.strictObject({
  id,
  sequence: z.int(),
  groupId: id,
  kind: z.enum(GROUP_KINDS),
  refrigerant: z.string(),
  massG: z.number(),
  typed: z.strictObject({ value: z.string(), unit: z.string() }).nullable(),
  from: placeView,
  to: placeView,
  /** Null where the server added or reversed. */
  howKnown: z.string().nullable(),
  occurredAt: instant,
  recordedAt: instant,
  /** The site's zone where there is a unit, else the firm's: `occurredAt` is shown in it. */
  timeZone: z.string(),
  bookingMonth: month,
  late: z.boolean(),
  addedByServer: z.boolean(),
  atLeast: z.boolean(),
  correctsGroupId: id.nullable(),
  /** The reversal group that cancels this entry's group, and the group that this entry's group cancels. */
  reversedByGroupId: id.nullable(),
  reversesGroupId: id.nullable(),
  recordedByName: z.string(),
  unitId: id.nullable(),
});
export type EntryRow = z.output<typeof entryRow>;

export const ENTRY_SORTS = ['-sequence', 'sequence', '-occurredAt', 'occurredAt'] as const;
/** Filters of the log; each has an index. */
export const entryFilters = z.strictObject({
  refrigerant: z.string().max(20).optional(),
  month: month.optional(),
  unitId: id.optional(),
  cylinderId: id.optional(),
  place: z.enum(PLACE_KINDS).optional(),
  personId: id.optional(),
  kind: z.enum(GROUP_KINDS).optional(),
  /** `reversed`: hide what was reversed and its reversals. */
  without: z.enum(['reversed']).optional(),
});

export const entryListQuery = pageQuery.extend({
  sort: z.enum(ENTRY_SORTS).default('-sequence'),
  ...entryFilters.shape,
});
export type EntryListQuery = z.output<typeof entryListQuery>;
export const entryPage = pageOf(entryRow);
/** The same rows as a file: no pages. */
export const entryExportQuery = entryListQuery.omit({ cursor: true, limit: true });
export type EntryExportQuery = z.output<typeof entryExportQuery>;

/** A whole group for the side sheet: entries, readings, statements, documents, answer, who, why, hash. */
export const groupView = z.strictObject({
  id,
  sequence: z.int(),
  kind: z.enum(GROUP_KINDS),
  occurredAt: instant,
  recordedAt: instant,
  timeZone: z.string(),
  recordedBy: id,
  recordedByName: z.string(),
  supervisedByName: z.string().nullable(),
  unitId: id.nullable(),
  unitLabel: z.string().nullable(),
  jobId: id.nullable(),
  chargeSheetId: id.nullable(),
  openWeighIn: z.boolean(),
  closesGroupId: id.nullable(),
  closedByGroupId: id.nullable(),
  reversesGroupId: id.nullable(),
  reversedByGroupId: id.nullable(),
  replacedByGroupId: id.nullable(),
  readings: z.array(
    z.strictObject({
      id,
      cylinderId: id,
      cylinderTag: z.string(),
      toolId: id.nullable(),
      toolName: z.string().nullable(),
      moment: z.string(),
      mode: z.string(),
      value: z.string(),
      unit: z.string(),
      /** A weigh-in that stays open is read again hours later. */
      readAt: instant,
      massG: z.number(),
      hoseFull: z.boolean(),
      hoseG: z.number().nullable(),
      /** Of the very scale on that day; null where none was named. */
      resolutionG: z.number().nullable(),
      repeatabilityG: z.number().nullable(),
      spanErrorRelative: z.number().nullable(),
      offsetG: z.number().nullable(),
    }),
  ),
  statements: z.array(z.strictObject({ about: z.string(), id, is: z.string(), by: z.string().nullable() })),
  documents: z.array(z.record(z.string(), z.unknown())),
  /** From the group's own record; null where none was told, and for a reader of some sites, who does not see the journal. */
  recoveryLevel: recoveryLevel.nullable(),
  reason: z.string().nullable(),
  note: z.string().nullable(),
  entries: z.array(entryRow),
  /** Of the group's own record in the chain; null for a reader, who does not see the journal. */
  hash: z.string().nullable(),
  previousHash: z.string().nullable(),
});
export type GroupView = z.output<typeof groupView>;

export const flagRow = z.strictObject({
  id,
  code: z.enum(FLAG_CODES),
  level: z.enum(['danger', 'look', 'note']),
  subject: z.strictObject({ kind: z.enum(['unit', 'cylinder', 'reclaimer', 'group']), id, label: z.string() }),
  groupId: id,
  massG: z.number().nullable(),
  refrigerant: z.string().nullable(),
  /** The masses in the sentence by their names there: a screen says `flag.<code>` anew in the person's unit. */
  massesG: z.record(z.string(), z.number()),
  /** In the caller's language, masses in grams. */
  message: z.string(),
  openedAt: instant,
  /** The groups that opened and closed it. */
  openedBy: id.nullable(),
  closedAt: instant.nullable(),
  closedBy: id.nullable(),
});
export type FlagRow = z.output<typeof flagRow>;

/** On hand, for the band on top: cylinders with content and their mass. */
export const onHand = z.strictObject({
  cylinderCount: z.int(),
  massG: z.number(),
  byRefrigerant: z.array(z.strictObject({ refrigerant: z.string(), massG: z.number() })),
});
export type OnHand = z.output<typeof onHand>;

export const flagListQuery = pageQuery.extend({
  sort: z.enum(['-openedAt', 'openedAt']).default('-openedAt'),
  /** Open ones; `false`: closed ones. */
  open: flagText.optional(),
  /** What it is about: a unit, a cylinder, or either or a reclaimer by its id. */
  unitId: id.optional(),
  cylinderId: id.optional(),
  subjectId: id.optional(),
  groupId: id.optional(),
});
export type FlagListQuery = z.output<typeof flagListQuery>;
export const flagPage = pageOf(flagRow);

export const readingRow = z.strictObject({
  id,
  groupId: id,
  kind: z.enum(GROUP_KINDS),
  cylinderId: id,
  toolId: id.nullable(),
  toolName: z.string().nullable(),
  at: instant,
  moment: z.enum(READING_MOMENTS),
  mode: z.enum(READING_MODES),
  value: z.string(),
  unit: z.string(),
  massG: z.number(),
  hoseFull: z.boolean(),
  hoseG: z.number().nullable(),
  reversed: z.boolean(),
  recordedByName: z.string(),
});
export type ReadingRow = z.output<typeof readingRow>;
export const readingListQuery = pageQuery.extend({
  sort: z.enum(['-at', 'at']).default('-at'),
  cylinderId: id,
});
export type ReadingListQuery = z.output<typeof readingListQuery>;
export const readingPage = pageOf(readingRow);

/** An addition as the leak rate counts it, on the calendar day at the site. */
export const countedAddition = z.strictObject({
  groupId: id,
  jobId: id.nullable(),
  occurredAt: instant,
  regulatoryDay: z.iso.date(),
  refrigerant: z.string(),
  putInG: z.number(),
  countedG: z.number(),
});
export const countedAdditionsResponse = z.strictObject({ unitId: id, items: z.array(countedAddition) });
