import { z } from 'zod';
import { day, decimalText, id, instant, pageOf, pageQuery, searchText, shortText } from '../lists/list.schema.ts';
import { typedMass } from '../units/mass.ts';
import { storedMass } from '../units/stored-mass.ts';

/** A unit is one independent refrigerant circuit and its equipment (the law counts circuits). */
export const APPLIANCE_KINDS = [
  'comfortCooling',
  'commercialRefrigeration',
  'industrialProcessRefrigeration',
  'other',
] as const;
export const applianceKind = z.enum(APPLIANCE_KINDS);
export const SUBSECTORS = [
  'residentialLightCommercial',
  'variableRefrigerantFlow',
  'refrigeratedTransport',
  'other',
] as const;
export const subsector = z.enum(SUBSECTORS);

/** How a full charge was determined (40 CFR 82.152 "Full charge", methods 1 to 4). */
export const FULL_CHARGE_METHODS = ['manufacturer', 'calculation', 'measured', 'establishedRange'] as const;
export const fullChargeMethod = z.enum(FULL_CHARGE_METHODS);
export type FullChargeMethod = z.output<typeof fullChargeMethod>;

export const serialNumber = z.strictObject({
  part: z.enum(['outdoor', 'indoor', 'module', 'other']),
  serial: shortText(60),
  model: shortText(80).nullish(),
});

/** What is in the circuit when it is registered. `notKnown` is an honest state: masses are summed and nothing is inferred. */
export const initialCharge = z.discriminatedUnion('state', [
  z.strictObject({ state: z.literal('factory'), mass: storedMass, at: instant, entryId: id, groupId: id }),
  z.strictObject({ state: z.literal('opening'), mass: storedMass, at: instant, entryId: id, groupId: id }),
  z.strictObject({ state: z.literal('notKnown') }),
]);

export const createUnitRequest = z.strictObject({
  id,
  siteId: id,
  /** What people on the site call it: `0412`, `back bedroom`. */
  tag: shortText(40),
  name: shortText(160),
  applianceKind,
  subsector: subsector.nullish(),
  refrigerant: shortText(20),
  refrigerantFrom: day,
  serials: z.array(serialNumber).max(60).default([]),
  nameplateReadable: z.boolean().default(true),
  designPressureHighKPaGauge: z.number().positive().max(20_000).nullish(),
  designPressureLowKPaGauge: z.number().positive().max(20_000).nullish(),
  installedOn: day.nullish(),
  /** Full charge with its method; null: not determined. */
  fullCharge: z.strictObject({ id, mass: storedMass, method: fullChargeMethod, validFrom: instant }).nullish(),
  initialCharge,
});
export type CreateUnitRequest = z.output<typeof createUnitRequest>;
export const updateUnitRequest = z.strictObject({
  tag: shortText(40).optional(),
  name: shortText(160).optional(),
  subsector: subsector.nullable().optional(),
  serials: z.array(serialNumber).max(60).optional(),
  nameplateReadable: z.boolean().optional(),
  designPressureHighKPaGauge: z.number().positive().max(20_000).nullable().optional(),
  designPressureLowKPaGauge: z.number().positive().max(20_000).nullable().optional(),
  installedOn: day.nullable().optional(),
});

export const addFullChargeRequest = z.strictObject({
  id,
  mass: storedMass,
  method: fullChargeMethod,
  validFrom: instant,
  jobId: id.nullish(),
  reason: shortText(500),
});
export const addUnitRefrigerantRequest = z.strictObject({
  id,
  refrigerant: shortText(20),
  validFrom: instant,
  jobId: id.nullish(),
});

/** Where the unit stands from then on. What was posted before stays where it happened. */
export const addUnitSiteRequest = z.strictObject({ id, siteId: id, validFrom: instant });
export const unitSite = z.strictObject({
  id,
  unitId: id,
  siteId: id,
  siteName: z.string(),
  customerId: id,
  customerName: z.string(),
  validFrom: instant,
});
export type UnitSite = z.output<typeof unitSite>;

export const fullCharge = z.strictObject({
  id,
  refrigerant: z.string(),
  massG: z.number(),
  typed: typedMass,
  method: fullChargeMethod,
  validFrom: instant,
  jobId: id.nullable(),
  reason: z.string().nullable(),
});

export const unit = z.strictObject({
  id,
  siteId: id,
  siteName: z.string(),
  customerId: id,
  customerName: z.string(),
  tag: z.string(),
  name: z.string(),
  applianceKind,
  subsector: subsector.nullable(),
  refrigerant: z.string(),
  serials: z.array(serialNumber),
  nameplateReadable: z.boolean(),
  designPressureHighKPaGauge: z.number().nullable(),
  designPressureLowKPaGauge: z.number().nullable(),
  installedOn: day.nullable(),
  fullCharge: fullCharge.nullable(),
  /** The book of this circuit. `known` false: `massG` is only the sum of what was put in and taken out. */
  book: z.strictObject({
    known: z.boolean(),
    massG: z.number(),
    byRefrigerant: z.array(z.strictObject({ refrigerant: z.string(), massG: z.number() })),
  }),
  /** t CO2 equivalent of the full charge, else of the book, by the firm's GWP set; null where the set has no value. */
  co2eT: z.number().nullable(),
  version: z.int(),
});
export type Unit = z.output<typeof unit>;

/** One segment of the installed line set; `parent` names the branch it comes off. */
export const lineSetBranch = z.strictObject({
  name: shortText(40),
  parent: shortText(40).nullish(),
  liquidOdMm: z.number().positive().max(120),
  gasOdMm: z.number().positive().max(120).nullish(),
  lengthM: z.number().min(0).max(10_000),
  riseM: z.number().min(-1000).max(1000).default(0),
  bends: z.int().min(0).max(1000).default(0),
  equivalentMPerBend: z.number().min(0).max(20).default(0),
  /** What was typed, shown in prints and when corrected. */
  typedLength: z.strictObject({ value: decimalText, unit: z.enum(['m', 'ft', 'in']) }).nullish(),
  reused: z.boolean().default(false),
  /** For a reused pipe: flushed, size and rating checked. */
  reuseChecked: z.boolean().default(false),
});
/** A change of the line set is a new dated one; earlier ones stay. */
export const addLineSetRequest = z.strictObject({
  id,
  validFrom: instant,
  branches: z.array(lineSetBranch).min(1).max(100),
  note: shortText(500).nullish(),
});
export const lineSet = z.strictObject({
  id,
  unitId: id,
  validFrom: instant,
  branches: z.array(lineSetBranch),
  note: z.string().nullable(),
});
export type LineSet = z.output<typeof lineSet>;

export const UNIT_SORTS = ['tag', '-tag', 'name', '-name'] as const;
export const unitListQuery = pageQuery.extend({
  sort: z.enum(UNIT_SORTS).default('tag'),
  siteId: id.optional(),
  customerId: id.optional(),
  refrigerant: shortText(20).optional(),
  /** Over tag, name, serials, site, address and customer. */
  search: searchText.optional(),
});
export type UnitListQuery = z.output<typeof unitListQuery>;
export const unitPage = pageOf(unit);
export const lineSetPage = pageOf(lineSet);
export const unitSitePage = pageOf(unitSite);
export const fullChargePage = pageOf(fullCharge);
