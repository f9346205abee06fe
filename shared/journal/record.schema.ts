import { z } from 'zod';
import {
  DOCUMENT_KINDS,
  EMPTY_BY,
  GROUP_KINDS,
  HOW_KNOWN,
  READING_MODES,
  READING_MOMENTS,
  UNIT_CONDITIONS,
} from '../ledger/entry-group.schema.ts';
import { ATMOSPHERE_KINDS, PLACE_KINDS } from '../ledger/place.ts';
import { recoveryLevel } from '../ledger/recovery-level.schema.ts';
import { decimalText, id, month } from '../lists/list.schema.ts';
import { exportRecord, sealKeyRecord, sealRecord } from '../proof/seal-record.schema.ts';
import { massUnit } from '../units/mass.ts';

/**
 * What is chained: the content of each journal record, written once as RFC 8785 text by the server and taken apart by
 * the database (`post_records`), which fills its columns from the text alone. Masses and decimals are strings, because
 * an RFC 8785 number is a double. Content holds no sequence. Every key is always present; what does not apply is null.
 */

/** In UTC: `2026-11-30T21:12:00.000Z`. */
const instantUtc = z.iso.datetime();
/** A whole number of micrograms. */
const micrograms = z.string().regex(/^(0|-?[1-9]\d{0,18})$/);
const positiveMicrograms = z.string().regex(/^[1-9]\d{0,18}$/);
const sha256Hex = z.string().regex(/^[0-9a-f]{64}$/);
const refrigerant = z.string().regex(/^R-[0-9A-Za-z()]{1,15}$/);
const typed = z.strictObject({ value: decimalText, unit: massUnit });

const place = z.strictObject({
  place: z.enum(PLACE_KINDS),
  id: id.nullable(),
  as: z.enum(ATMOSPHERE_KINDS).nullable(),
});

const authorship = { recordedAt: instantUtc, recordedBy: id };

export const readingRecord = z.strictObject({
  id,
  cylinderId: id,
  toolId: id.nullable(),
  /** Null stands for the group's `occurredAt`. */
  at: instantUtc.nullable(),
  moment: z.enum(READING_MOMENTS),
  mode: z.enum(READING_MODES),
  value: decimalText,
  unit: massUnit,
  massMicrograms: micrograms,
  hoseFull: z.boolean().nullable(),
  hose: typed.nullable(),
  hoseMicrograms: micrograms.nullable(),
  /** Accuracy of the very scale on that day, `formulas.md` (j); null without a tool. */
  scale: z
    .strictObject({
      resolutionG: decimalText,
      repeatabilityG: decimalText,
      spanErrorRelative: decimalText,
      offsetG: decimalText,
    })
    .nullable(),
});

export const groupRecord = z.strictObject({
  type: z.literal('group'),
  id,
  ...authorship,
  kind: z.enum(GROUP_KINDS),
  unitId: id.nullable(),
  siteId: id.nullable(),
  jobId: id.nullable(),
  chargeSheetId: id.nullable(),
  supervisedBy: id.nullable(),
  occurredAt: instantUtc,
  /** Calendar day at the site (else in the firm's zone), with the version of the zone data that said so. */
  regulatoryDay: z.iso.date(),
  zoneDataVersion: z.string().min(1),
  deviceSentAt: instantUtc.nullable(),
  openWeighIn: z.boolean(),
  closesGroupId: id.nullable(),
  reversesGroupId: id.nullable(),
  replacesGroupId: id.nullable(),
  answersGroupId: id.nullable(),
  /** SHA-256 of the RFC 8785 form of the request without `deviceSentAt`: the same id with other content is refused. */
  requestHash: sha256Hex,
  readings: z.array(readingRecord),
  statements: z.array(
    z.strictObject({
      about: z.literal('unit'),
      id,
      is: z.enum(UNIT_CONDITIONS),
      by: z.enum(EMPTY_BY).nullable(),
    }),
  ),
  documents: z.array(
    z.strictObject({
      kind: z.enum(DOCUMENT_KINDS),
      number: z.string(),
      date: z.iso.date(),
      refrigerant: refrigerant.nullable(),
      massMicrograms: positiveMicrograms.nullable(),
      typed: typed.nullable(),
    }),
  ),
  /** Only where one was told; records from before it was asked for have no such key. */
  recoveryLevel: recoveryLevel.optional(),
  reason: z.string().nullable(),
  /** SHA-256 of salt and note; the words stand beside the chain and can be erased. */
  noteHash: sha256Hex.nullable(),
  /** All entries of the group, those that the server added too, in the order of their records. */
  entryIds: z.array(id),
});
export type GroupRecord = z.output<typeof groupRecord>;

export const entryRecord = z.strictObject({
  type: z.literal('entry'),
  id,
  ...authorship,
  groupId: id,
  refrigerant,
  massMicrograms: positiveMicrograms,
  typed: typed.nullable(),
  from: place,
  to: place,
  /** Null only where the server added or reversed. */
  howKnown: z.enum(HOW_KNOWN).nullable(),
  occurredAt: instantUtc,
  bookingMonth: month,
  late: z.boolean(),
  addedByServer: z.boolean(),
  atLeast: z.boolean(),
  takenBack: z.boolean(),
  correctsGroupId: id.nullable(),
  reversesEntryId: id.nullable(),
  /**
   * The unit at one of the ends, else the one in whose timeline the server judged this, else the group's; and the site
   * that it stood at then, which is what a reader may see.
   */
  unitId: id.nullable(),
  siteId: id.nullable(),
});
export type EntryRecord = z.output<typeof entryRecord>;

/** Rows that may only change together with a record of what stood before and after. */
export const REGISTER_NOUNS = [
  'firm',
  'membership',
  'customer',
  'site',
  'party',
  'tool',
  'unit',
  'job',
  'cylinder',
  'unitRefrigerant',
  'unitFullCharge',
  'unitSite',
  'chargeBasis',
  'lineSet',
  'chargeSheet',
  'cylinderTare',
  'period',
  'settlement',
  'carriedItem',
  'purchasePrice',
  'rentalTerms',
  'import',
] as const;
export type RegisterNoun = (typeof REGISTER_NOUNS)[number];

export const registerRecord = z.strictObject({
  type: z.literal('register'),
  /** Of the record itself. */
  id,
  ...authorship,
  noun: z.enum(REGISTER_NOUNS),
  /** The row: its `id`; the person of a membership. */
  subjectId: id,
  /** Version that the row has after this change, from 1; 1 for what is only ever added. */
  version: z.int().positive(),
  /** Null when the row is new. Numbers as decimal strings; what names a person as the hash of salt and text. */
  before: z.record(z.string(), z.unknown()).nullable(),
  after: z.record(z.string(), z.unknown()),
});
export type RegisterRecord = z.output<typeof registerRecord>;

export const journalRecord = z.discriminatedUnion('type', [
  groupRecord,
  entryRecord,
  registerRecord,
  sealRecord,
  sealKeyRecord,
  exportRecord,
]);
export type JournalRecord = z.output<typeof journalRecord>;

/** Second argument of `post_records`: what the judge derived. It is kept beside the chain and can be computed again. */
export const derivedRows = z.strictObject({
  placeStates: z
    .array(
      z.strictObject({
        place: z.enum(['cylinder', 'unit']),
        id,
        known: z.boolean(),
        state: z.record(z.string(), z.unknown()),
        lastOccurredAt: instantUtc.nullable(),
      }),
    )
    .optional(),
  flagsOpened: z
    .array(
      z.strictObject({
        id,
        code: z.string(),
        subjectKind: z.enum(['unit', 'cylinder', 'reclaimer', 'group']),
        subjectId: id,
        groupId: id,
        openedByGroupId: id,
        refrigerant: refrigerant.nullable(),
        massMicrograms: micrograms.nullable(),
        figures: z.record(z.string(), micrograms),
        standing: z.boolean(),
        at: instantUtc,
      }),
    )
    .optional(),
  flagsChanged: z
    .array(z.strictObject({ id, massMicrograms: micrograms.nullable(), figures: z.record(z.string(), micrograms) }))
    .optional(),
  flagsClosed: z.array(z.strictObject({ id, closedByGroupId: id, at: instantUtc })).optional(),
  /** Words beside the chain: `hash` of salt (hex, at least 16 bytes) and content stands in the record `recordId`. */
  texts: z
    .array(z.strictObject({ id, recordId: id, field: z.string(), salt: z.string(), content: z.string() }))
    .optional(),
});
export type DerivedRows = z.output<typeof derivedRows>;
