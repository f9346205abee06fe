import { z } from 'zod';

export const SAFETY_CLASSES = ['A1', 'A2L', 'A2', 'A3', 'B1', 'B2L', 'B2', 'B3'] as const;

/** One row of `data/refrigerants.json`. A status says whether the figure was read in a source, computed, or is from memory. */
export const refrigerant = z.strictObject({
  designation: z.string().regex(/^R-/),
  chemical: z.string().nullable(),
  /** Nominal composition by mass (ASHRAE 34); null for a single component. */
  composition: z.array(z.strictObject({ component: z.string(), massPct: z.number().positive() })).nullable(),
  type: z.string(),
  safetyClass: z.enum(SAFETY_CLASSES),
  safetyClassStatus: z.string(),
  molarMassGPerMol: z.number().positive(),
  lflKgM3: z.number().positive().nullable(),
  lflStatus: z.string().nullable(),
  rclKgM3: z.number().positive().nullable(),
  rclStatus: z.string().nullable(),
  odp: z.number().min(0).nullable(),
  criticalTempC: z.number(),
  criticalPressureBarAbs: z.number(),
  normalBoilingC: z.number(),
  glideClass: z.string(),
  glideKAt1Atm: z.number().nullable(),
  glideKAt40CBubble: z.number().nullable(),
  thermoStatus: z.string(),
  gwpStatus: z.string(),
  status: z.string(),
  source: z.string().min(1),
  notes: z.string(),
});
export type Refrigerant = z.output<typeof refrigerant>;
