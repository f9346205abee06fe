import { z } from 'zod';
import { day, id, instant, pageOf, pageQuery, searchText, shortText } from '../lists/list.schema.ts';
import { typedMass } from '../units/mass.ts';
import { storedMass } from '../units/stored-mass.ts';

export const CYLINDER_KINDS = ['refillable', 'nonRefillable', 'recovery'] as const;
export const cylinderKind = z.enum(CYLINDER_KINDS);
export const CONTENT_STATES = ['virgin', 'recovered', 'recycled', 'reclaimed'] as const;
export const contentState = z.enum(CONTENT_STATES);

/** Whose cylinder it is: ours, a supplier's (rented), a customer's, or another firm's on loan. */
export const cylinderOwner = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('ours') }),
  z.strictObject({ kind: z.literal('party'), id }),
  z.strictObject({ kind: z.literal('customer'), id }),
]);

export const createCylinderRequest = z.strictObject({
  id,
  /** Number on the collar or tag: `7741`. */
  tag: shortText(40),
  kind: cylinderKind,
  refrigerant: shortText(20),
  contentState: contentState.default('virgin'),
  owner: cylinderOwner.default({ kind: 'ours' }),
  tare: z.strictObject({ id, mass: storedMass, validFrom: instant }),
  waterCapacity: storedMass.nullish(),
  /** Stamped limit of the contents where there is one; else the published rule applies to refillable and recovery cylinders. */
  stampedLimit: storedMass.nullish(),
  servicePressureKPaGauge: z.number().positive().max(30_000).nullish(),
  retestDue: day.nullish(),
  heldBy: id.nullish(),
  batch: shortText(60).nullish(),
});
export type CreateCylinderRequest = z.output<typeof createCylinderRequest>;
export const updateCylinderRequest = z.strictObject({
  tag: shortText(40).optional(),
  contentState: contentState.optional(),
  retestDue: day.nullable().optional(),
  heldBy: id.nullable().optional(),
  batch: shortText(60).nullable().optional(),
  waterCapacity: storedMass.nullable().optional(),
  stampedLimit: storedMass.nullable().optional(),
  servicePressureKPaGauge: z.number().positive().max(30_000).nullable().optional(),
});
export const addTareRequest = z.strictObject({ id, tare: storedMass, validFrom: instant, reason: shortText(500) });

export const cylinder = z.strictObject({
  id,
  tag: z.string(),
  kind: cylinderKind,
  refrigerant: z.string(),
  contentState,
  owner: cylinderOwner,
  tareG: z.number(),
  tareTyped: typedMass,
  waterCapacityG: z.number().nullable(),
  /**
   * Largest net content: the stamped limit, else 0.8 x water capacity x liquid density at 25 C of the lightest that is
   * in it (while it is empty: of what it is meant for); null: not known or none.
   */
  limitG: z.number().nullable(),
  stampedLimitG: z.number().nullable(),
  servicePressureKPaGauge: z.number().nullable(),
  /** Must bear the pressure at 55 C of all that is in it (while it is empty: of what it is meant for); null: no figure. */
  pressureRatingHolds: z.boolean().nullable(),
  retestDue: day.nullable(),
  heldBy: id.nullable(),
  heldByName: z.string().nullable(),
  batch: z.string().nullable(),
  contentG: z.number(),
  byRefrigerant: z.array(z.strictObject({ refrigerant: z.string(), massG: z.number() })),
  mixed: z.boolean(),
  lastWeighedAt: instant.nullable(),
  lastReadingGrossG: z.number().nullable(),
  openWeighInGroupId: id.nullable(),
  version: z.int(),
});
export type Cylinder = z.output<typeof cylinder>;

export const CYLINDER_SORTS = ['tag', '-tag'] as const;
export const cylinderListQuery = pageQuery.extend({
  sort: z.enum(CYLINDER_SORTS).default('tag'),
  heldBy: id.optional(),
  kind: cylinderKind.optional(),
  refrigerant: shortText(20).optional(),
  /** Over tag and batch. */
  search: searchText.optional(),
});
export type CylinderListQuery = z.output<typeof cylinderListQuery>;
export const cylinderPage = pageOf(cylinder);
