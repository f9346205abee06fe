import { z } from 'zod';
import { returned } from '../calculations/decimals.ts';
import { cautionsField } from '../calculations/fields.ts';
import { gwpSet } from '../reference/gwp.ts';
import { ROUNDING_DIRECTIONS } from '../units/round.ts';
import { MAX_EXPRESSION_LENGTH } from './formula-contract.ts';

/**
 * Request and response of `POST /calculations/charge`. Unknown keys are refused; what is optional may be absent or null.
 * The upper bounds are no rules of the trade: they only keep out figures that no system has (a typing slip of a factor
 * of a thousand) and requests that would keep a server busy.
 */
const MAX_LENGTH_M = 10_000;
const MAX_MASS_G = 10_000_000;
const MAX_G_PER_M = 100_000;
export const MAX_BRANCHES = 100;

const lengthM = z.number().min(0).max(MAX_LENGTH_M);
const massG = z.number().min(0).max(MAX_MASS_G);
/** A table or a letter may say "remove". */
const signedMassG = z.number().min(-MAX_MASS_G).max(MAX_MASS_G);
const odMm = z.number().positive().max(200);
const gPerM = z.number().min(0).max(MAX_G_PER_M);
/** A form that keeps all fields of a choice sends those of the other kinds as null. */
const unused = z.null().optional();

export const CHARGE_JOBS = ['newInstall', 'lineSetChange', 'fullRecharge'] as const;
export const chargeJob = z.enum(CHARGE_JOBS);

export const ALLOCATIONS = ['proportional', 'largestFirst', 'smallestFirst'] as const;
/** In which order a shared pre-charged length is used up over different sizes; needed only there. */
export const allocation = z.enum(ALLOCATIONS).nullish();

/** What the factory charge already serves. */
export const precharge = z.discriminatedUnion('scope', [
  z.strictObject({ scope: z.literal('system'), lengthM, allocation, massG: unused }),
  z.strictObject({ scope: z.literal('systemPerBranch'), lengthM, allocation, massG: unused }),
  z.strictObject({ scope: z.literal('branch'), lengthM, allocation, massG: unused }),
  z.strictObject({ scope: z.literal('mass'), massG, lengthM: unused, allocation }),
]);

export const chargeRate = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('flat'), gPerM }),
  z.strictObject({
    kind: z.literal('byLiquidPipe'),
    sizes: z
      .array(z.strictObject({ liquidOdMm: odMm, gPerM }))
      .min(1)
      .max(30),
  }),
  z.strictObject({
    kind: z.literal('stepped'),
    /** On the total length; `upToM` belongs to its bracket. */
    steps: z
      .array(z.strictObject({ upToM: lengthM, extraG: signedMassG }))
      .min(1)
      .max(50),
  }),
  z.strictObject({
    kind: z.literal('formula'),
    /** Over L, N, Lp and L635, L952, ...: `formula.ts` says what may stand in it. Gives grams. */
    expression: z.string().min(1).max(MAX_EXPRESSION_LENGTH),
  }),
  z.strictObject({ kind: z.literal('fixedMass'), extraG: signedMassG }),
]);

export const chargeAllowance = z.strictObject({
  label: z.string().trim().min(1).max(80),
  /** Below zero where the manual takes something off for an accessory. */
  gEach: signedMassG,
  count: z.number().int().min(0).max(1000),
  /** Capacity-ratio factor of some manuals; 1 where absent. */
  factor: z.number().min(0).max(100).nullish(),
});

export const chargeLimits = z.strictObject({
  minLengthM: lengthM.nullish(),
  maxLengthM: lengthM.nullish(),
  /** Longest path from the outdoor unit to one indoor unit. */
  maxBranchM: lengthM.nullish(),
  /** Height between the outdoor unit and an indoor unit, either way. */
  maxRiseM: lengthM.nullish(),
  /** Height between the highest and the lowest indoor unit. */
  maxDropM: lengthM.nullish(),
  maxTotalChargeG: massG.nullish(),
});

export const chargeRounding = z.strictObject({
  toG: z.number().min(0.001).max(10_000),
  direction: z.enum(ROUNDING_DIRECTIONS),
});

/** What the installation manual says about charging this model. */
export const chargeBasis = z.strictObject({
  refrigerant: z.string().trim().min(1).max(20),
  factoryChargeG: massG,
  precharge: precharge.nullish(),
  rate: chargeRate,
  /** Where the expansion device sits; changes no figure until a source gives narrower plausible bands. */
  metering: z.enum(['indoor', 'outdoor', 'unknown']).nullish(),
  allowances: z.array(chargeAllowance).max(100).nullish(),
  limits: chargeLimits.nullish(),
  rounding: chargeRounding.nullish(),
  /** What to do for a line shorter than the pre-charged length; `none` where absent. */
  shortLine: z.enum(['none', 'remove']).nullish(),
});
export type ChargeBasis = z.output<typeof chargeBasis>;

export const lineSetBranch = z.strictObject({
  /** Unique in its line set: `parent` and the answer name branches by it. */
  name: z.string().trim().min(1).max(60),
  /** The branch that this one comes off (a main pipe, a branch box). */
  parent: z.string().trim().min(1).max(60).nullish(),
  liquidOdMm: odMm,
  gasOdMm: odMm.nullish(),
  /** Length of the run, one way. */
  lengthM,
  /** Upwards positive, along this pipe, seen from the outdoor unit. */
  riseM: z.number().min(-1000).max(1000).nullish(),
  bends: z.number().int().min(0).max(1000).nullish(),
  /** Counts for the longest lengths, never for charge. */
  equivalentMPerBend: z.number().min(0).max(10).nullish(),
});
export const lineSet = z.strictObject({ branches: z.array(lineSetBranch).min(1).max(MAX_BRANCHES) });
export type LineSetRequest = z.output<typeof lineSet>;

export const chargeRequest = z.strictObject({
  job: chargeJob,
  basis: chargeBasis,
  lineSet,
  /** The line set that is replaced: required for `lineSetChange`, unused otherwise. */
  previousLineSet: lineSet.nullish(),
  gwpSet,
});
export type ChargeRequest = z.output<typeof chargeRequest>;

export const chargeResponse = z.strictObject({
  extraG: returned('g', 'the change in a line-set change; below zero: recover'),
  totalG: returned('g', 'factory charge + extra of the (new) line set'),
  weighInG: returned('g').min(0),
  recoverG: returned('g').min(0),
  co2eT: returned(
    't',
    'of totalG; null where the set gives this refrigerant no value, which a warning says',
  ).nullable(),
  gwpSet,
  ratePlausibility: z
    .array(
      z.strictObject({
        branch: z.string(),
        lowGPerM: z.number().describe('g/m, 1 decimal'),
        highGPerM: z.number().describe('g/m, 1 decimal'),
        verdict: z.enum(['plausible', 'tooLow', 'tooHigh']),
      }),
    )
    .describe('one for each branch whose rate and pipe can be compared'),
  steps: z.array(
    z.strictObject({
      label: z.string(),
      expression: z.string().describe('the arithmetic with its figures: 12.0 m - 7.5 m'),
      value: z.number().describe('m, g and g/m 3 decimals, t 5 decimals'),
      unit: z.enum(['m', 'g', 'g/m', 't', '']),
      source: z.string(),
    }),
  ),
  warnings: z.array(z.strictObject({ code: z.string(), message: z.string() })),
  cautions: cautionsField,
  versions: z.record(z.string(), z.string()).describe('of the rules and of each table that was used'),
});
export type ChargeResponse = z.output<typeof chargeResponse>;
