import { z } from 'zod';
import { typedMass, typedSignedMass } from '../units/mass.ts';
import { ATMOSPHERE_KINDS, kindNeedsId, PLACE_KINDS, type PlaceKind } from './place.ts';
import { recoveryLevelRequest } from './recovery-level.schema.ts';

/** What a group is called. A label for people: it changes no balance. */
export const GROUP_KINDS = [
  'purchase',
  'opening',
  'factoryCharge',
  'extraCharge',
  'fullRecharge',
  'refill',
  'adjust',
  'putBack',
  'traceCharge',
  'recovery',
  'overchargeRemoved',
  'heelRemoved',
  'vacuum',
  'transfer',
  'weighing',
  'return',
  'reclaim',
  'destruction',
  'certificate',
  'otherContractor',
  'warrantyReplacement',
  'relocation',
  'handOver',
  'loss',
  'found',
  'monthClose',
] as const;
export type GroupKind = (typeof GROUP_KINDS)[number];

export const READING_MOMENTS = ['before', 'after', 'only'] as const;
export const READING_MODES = ['gross', 'zeroed'] as const;
export const UNIT_CONDITIONS = ['empty', 'full', 'notFull', 'moreThanFull', 'notKnown'] as const;
export type UnitCondition = (typeof UNIT_CONDITIONS)[number];
/** What showed that a unit is empty: recovery completed, vacuum on the whole circuit, found flat, found open. */
export const EMPTY_BY = ['recovery', 'vacuum', 'foundFlat', 'open'] as const;
export type EmptyBy = (typeof EMPTY_BY)[number];
export const HOW_KNOWN = ['weighed', 'estimated', 'invoice', 'label', 'factory', 'certificate'] as const;
export type HowKnown = (typeof HOW_KNOWN)[number];
export const DOCUMENT_KINDS = ['invoice', 'certificate', 'deliveryNote', 'other'] as const;

/** A mass as typed, as these requests carry it. */
export type { TypedMass } from '../units/mass.ts';

/** Sizes that keep one request readable and cheap to judge. */
export const GROUP_LIMITS = { readings: 50, entries: 100, statements: 10, documents: 20 } as const;

/** Refusals that no JSON Schema keyword names carry their code here: `issue.params.code`. */
const refuse = (ctx: z.RefinementCtx, code: string, path: (string | number)[], message: string): void => {
  ctx.addIssue({ code: 'custom', path, message, params: { code } });
};

/** NUL and lone surrogates cannot be stored by PostgreSQL or hashed in canonical JSON. */
const storable = (text: string): boolean => !/\p{Cs}/u.test(text) && !text.includes('\u0000');
const storableText = (maxLength: number) =>
  z
    .string()
    .max(maxLength)
    .refine(storable, { message: 'Characters that cannot be stored', params: { code: 'textNotStorable' } });

/** Capitals are the same id (RFC 9562, section 4); books and look-ups know the small letters. */
const id = z.uuid().toLowerCase();
/** Made by the client and kept across retries, so that a resend cannot post twice. */
const clientMadeId = z.uuidv7().toLowerCase();
const instant = z.iso.datetime({ offset: true });
const refrigerantName = z.string().regex(/^R-[0-9A-Za-z()]{1,15}$/);

/** More than nothing. A value that is no decimal has been refused already. */
const positiveMass = typedMass.refine(({ value }) => !/^[0.]*$/.test(value), {
  path: ['value'],
  message: 'More than zero',
  params: { code: 'massNotPositive', allowed: 0 },
});

export const placeSchema = z
  .strictObject({
    place: z.enum(PLACE_KINDS),
    id: id.nullish(),
    as: z.enum(ATMOSPHERE_KINDS).nullish(),
  })
  .superRefine((value, ctx) => {
    if (kindNeedsId(value.place) !== Boolean(value.id)) {
      refuse(ctx, value.id ? 'placeIdNotAllowed' : 'placeIdRequired', ['id'], `id of a ${value.place}`);
    }
    if ((value.place === 'atmosphere') !== Boolean(value.as)) {
      refuse(ctx, value.as ? 'placeAsNotAllowed' : 'placeAsRequired', ['as'], `as of a ${value.place}`);
    }
  });

export const readingSchema = z
  .strictObject({
    id: clientMadeId,
    cylinderId: id,
    toolId: id.nullish(),
    /** When the scale was read; null stands for the group's `occurredAt`. */
    at: instant.nullish(),
    moment: z.enum(READING_MOMENTS),
    /** `gross` includes the tare; `zeroed` is what the scale shows since it was zeroed (minus 90) and states nothing. */
    mode: z.enum(READING_MODES),
    value: typedSignedMass.shape.value,
    unit: typedSignedMass.shape.unit,
    /** Was the hose filled and purged when this reading was taken? Its content then counts as content of the cylinder. */
    hoseFull: z.boolean().nullish(),
    hose: typedMass.nullish(),
  })
  .superRefine((reading, ctx) => {
    const { value, unit } = reading;
    const isDecimal = typedSignedMass.shape.value.safeParse(value).success;
    if (isDecimal && !typedSignedMass.safeParse({ value, unit }).success) {
      refuse(ctx, 'massTooLarge', ['value'], 'Largest mass: 4,000 t');
    }
    if (reading.mode === 'gross' && value.startsWith('-')) {
      refuse(ctx, 'grossReadingNegative', ['value'], 'A gross reading is not below zero');
    }
    if (reading.hoseFull && !reading.hose) {
      refuse(ctx, 'hoseContentRequired', ['hose'], 'A full hose needs its content');
    }
  });

export const enteredMassSchema = z.strictObject({
  id: clientMadeId,
  /** Null only from a mixed cylinder: the server then writes one entry per refrigerant by the book. */
  refrigerant: refrigerantName.nullish(),
  mass: positiveMass,
  from: placeSchema,
  to: placeSchema,
  howKnown: z.enum(HOW_KNOWN),
});

export const statementSchema = z
  .strictObject({
    about: z.literal('unit'),
    id,
    is: z.enum(UNIT_CONDITIONS),
    by: z.enum(EMPTY_BY).nullish(),
  })
  .superRefine((statement, ctx) => {
    if (statement.by && statement.is !== 'empty') {
      refuse(ctx, 'statementByNotAllowed', ['by'], 'Only an empty unit says by what');
    }
  });

export const documentSchema = z.strictObject({
  kind: z.enum(DOCUMENT_KINDS),
  number: storableText(80).min(1),
  date: z.iso.date(),
  refrigerant: refrigerantName.nullish(),
  mass: positiveMass.nullish(),
});

/** Body of `POST /entry-groups`. Optional fields may be absent or null; unknown keys are refused. */
export const entryGroupRequest = z
  .strictObject({
    groupId: clientMadeId,
    schema: z.literal(1),
    kind: z.enum(GROUP_KINDS),
    unitId: id.nullish(),
    jobId: id.nullish(),
    chargeSheetId: id.nullish(),
    supervisedBy: id.nullish(),
    /** At the site, as the person says. */
    occurredAt: instant,
    /** The device's clock as it sends: outside the comparison of contents. */
    deviceSentAt: instant.nullish(),
    openWeighIn: z.boolean().nullish(),
    closesGroupId: id.nullish(),
    readings: z.array(readingSchema).max(GROUP_LIMITS.readings).nullish(),
    entries: z.array(enteredMassSchema).max(GROUP_LIMITS.entries).nullish(),
    statements: z.array(statementSchema).max(GROUP_LIMITS.statements).nullish(),
    documents: z.array(documentSchema).max(GROUP_LIMITS.documents).nullish(),
    /** Told once, with the recovery that is completed. */
    recoveryLevel: recoveryLevelRequest.nullish(),
    reason: storableText(1_000).nullish(),
    note: storableText(4_000).nullish(),
  })
  .superRefine((group, ctx) => {
    const readings = group.readings ?? [];
    const entries = group.entries ?? [];
    const statements = group.statements ?? [];
    if (!readings.length && !entries.length && !statements.length && !group.documents?.length) {
      refuse(ctx, 'groupEmpty', [], 'A group holds entries, readings, statements or documents');
    }
    if (group.openWeighIn) {
      const [reading, ...others] = readings;
      const isOneStart = reading?.moment === 'before' && !others.length && !entries.length;
      if (!isOneStart || !group.unitId || group.closesGroupId) {
        refuse(ctx, 'openWeighInForm', ['openWeighIn'], 'An open weigh-in is one before reading and its unit');
      }
    }
    if (group.closesGroupId && !readings.some((reading) => reading.moment === 'after')) {
      refuse(ctx, 'closingReadingRequired', ['readings'], 'What closes a weigh-in holds its after reading');
    }
    if (group.recoveryLevel && !statements.some(({ is, by }) => is === 'empty' && by === 'recovery')) {
      refuse(ctx, 'levelOfCompletedRecovery', ['recoveryLevel'], 'With a unit that is empty by recovery');
    }
    entries.forEach((entry, index) => {
      const { from, to } = entry;
      for (const end of ['from', 'to'] as const) {
        if (group.kind !== 'monthClose' && isJudgesPlace(entry[end].place)) {
          refuse(
            ctx,
            'placeOnlyByServer',
            ['entries', index, end, 'place'],
            'Only the judge and month close post here',
          );
        }
      }
      if (from.place === to.place && (from.id ?? null) === (to.id ?? null) && (from.as ?? null) === (to.as ?? null)) {
        refuse(ctx, 'entryToItself', ['entries', index, 'to'], 'From and to are the same place');
      }
      if (!entry.refrigerant && from.place !== 'cylinder') {
        refuse(ctx, 'refrigerantRequired', ['entries', index, 'refrigerant'], 'Only a mixed cylinder leaves it open');
      }
    });
    refuseRepeats(
      ctx,
      'entries',
      entries.map((entry) => entry.id),
      'id',
    );
    refuseRepeats(
      ctx,
      'readings',
      readings.map((reading) => reading.id),
      'id',
    );
    refuseRepeats(
      ctx,
      'statements',
      statements.map((statement) => statement.id),
      'id',
    );
    refuseRepeats(
      ctx,
      'readings',
      readings.map((reading) => `${reading.cylinderId} ${reading.moment}`),
      'moment',
    );
  });
export type EntryGroupRequest = z.output<typeof entryGroupRequest>;

/** The differences that follow from statements: posted by hand they would hide one another. */
const JUDGES_PLACES: readonly PlaceKind[] = ['cylinderDifference', 'unitDifference', 'supplierShortFill'];
const isJudgesPlace = (kind: PlaceKind): boolean => JUDGES_PLACES.includes(kind);

/** A second reading of one cylinder at one moment, or a second answer for one unit, would leave open which one holds. */
function refuseRepeats(ctx: z.RefinementCtx, list: string, keys: string[], field: string): void {
  keys.forEach((key, index) => {
    if (keys.indexOf(key) !== index) refuse(ctx, 'repeated', [list, index, field], `Stands twice in ${list}`);
  });
}

/** Body of `POST /entry-groups/{id}/reversal`: withdraws the group and, with `replacement`, posts the right one. */
export const reversalRequest = z.strictObject({
  groupId: clientMadeId,
  schema: z.literal(1),
  deviceSentAt: instant.nullish(),
  reason: storableText(1_000).min(1),
  replacement: entryGroupRequest.nullish(),
});
export type ReversalRequest = z.output<typeof reversalRequest>;

/** Body of `POST /entry-groups/{id}/answer`: an answer given later, a record of its own. */
export const answerRequest = z.strictObject({
  groupId: clientMadeId,
  schema: z.literal(1),
  deviceSentAt: instant.nullish(),
  statement: statementSchema,
});
export type AnswerRequest = z.output<typeof answerRequest>;
