import { z } from 'zod';
import { GROUP_KINDS } from '../ledger/entry-group.schema.ts';
import { id, instant, month } from '../lists/list.schema.ts';

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
  howKnown: z.string(),
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
export const entryFilters = z.strictObject({
  refrigerant: z.string().max(20).optional(),
  month: month.optional(),
  unitId: id.optional(),
  cylinderId: id.optional(),
  place: z.string().max(30).optional(),
  personId: id.optional(),
  kind: z.enum(GROUP_KINDS).optional(),
  /** `reversed`: hide what was reversed and its reversals. */
  without: z.enum(['reversed']).optional(),
});

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
      toolName: z.string().nullable(),
      moment: z.string(),
      mode: z.string(),
      value: z.string(),
      unit: z.string(),
      massG: z.number(),
      hoseFull: z.boolean(),
      hoseG: z.number().nullable(),
      resolutionG: z.number(),
    }),
  ),
  statements: z.array(z.strictObject({ about: z.string(), id, is: z.string(), by: z.string().nullable() })),
  documents: z.array(z.record(z.string(), z.unknown())),
  reason: z.string().nullable(),
  note: z.string().nullable(),
  entries: z.array(entryRow),
  hash: z.string(),
  previousHash: z.string(),
});
export type GroupView = z.output<typeof groupView>;

export const flagRow = z.strictObject({
  id,
  code: z.string(),
  subject: z.strictObject({ kind: z.enum(['unit', 'cylinder', 'group']), id, label: z.string() }),
  groupId: id,
  massG: z.number().nullable(),
  refrigerant: z.string().nullable(),
  openedAt: instant,
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
