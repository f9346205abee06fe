import { z } from 'zod';
import { ATMOSPHERE_KINDS } from '../ledger/place.ts';
import { month } from '../lists/list.schema.ts';
import { gwpSet } from '../reference/gwp.ts';

export const EMISSIONS_BY = ['refrigerant', 'customer', 'site', 'month'] as const;

export const emissionsQuery = z
  .strictObject({
    /** Booking months, both included; left out: from the first, to the last. */
    from: month.optional(),
    to: month.optional(),
    by: z.enum(EMISSIONS_BY).default('refrigerant'),
    /** By whose figures CO2 equivalents are worked out; left out: the firm's set. */
    gwpSet: gwpSet.optional(),
  })
  .superRefine(({ from, to }, ctx) => {
    if (!from || !to || from <= to) return;
    const params = { code: 'periodBackwards', allowed: from };
    ctx.addIssue({ code: 'custom', path: ['to'], message: 'backwards', params });
  });
export type EmissionsQuery = z.output<typeof emissionsQuery>;

/** Masses that went to the atmosphere. Below zero where more was taken back in the period than was lost. */
const masses = {
  measuredG: z.number(),
  inferredG: z.number(),
  hoseG: z.number(),
  /** Measured, inferred and from hoses. What was lost before our care is not in it. */
  totalG: z.number(),
  /** The part of the total that is only "at least": a unit was left not full. */
  atLeastG: z.number(),
  /** Lost before our care, or not known when; kept apart. */
  beforeOurCareG: z.number(),
  /** Of the total, in t; null: the set has no figure for this refrigerant. */
  co2eT: z.number().nullable(),
  beforeOurCareCo2eT: z.number().nullable(),
};

export const emissionLine = z.strictObject({
  /** Of the customer or site, the month, or the refrigerant again; null: of no site (from stock, by month close). */
  key: z.string().nullable(),
  label: z.string().nullable(),
  refrigerant: z.string(),
  ...masses,
  gwp: z.number().nullable(),
});
export type EmissionLine = z.output<typeof emissionLine>;

export const emissionsResponse = z.strictObject({
  /** By booking month, refrigerant and how: as they are in the log. */
  items: z.array(
    z.strictObject({
      bookingMonth: month,
      refrigerant: z.string(),
      as: z.enum(ATMOSPHERE_KINDS),
      massG: z.number(),
      atLeastG: z.number(),
    }),
  ),
  by: z.enum(EMISSIONS_BY),
  lines: z.array(emissionLine),
  total: z.strictObject({
    ...masses,
    /** Without a figure in this set, so that they are in no CO2 equivalent above. */
    notCovered: z.array(z.string()),
  }),
  gwpSet: z.strictObject({
    name: gwpSet,
    sources: z.array(z.strictObject({ refrigerant: z.string(), source: z.string() })),
  }),
});
export type EmissionsResponse = z.output<typeof emissionsResponse>;
