import type { Refusal } from '../problems/outcome.ts';
import { referenceData, requireValue } from '../reference/reference-data.fixture.ts';
import { calculateCharge } from './calculate-charge.ts';
import { type ChargeBasis, type ChargeRequest, chargeRequest, type LineSetRequest } from './charge.schema.ts';
import type { ChargeResult } from './charge-result.ts';
import { compileFormula } from './formula.ts';

/** One pipe or several, for tests: `pipe(12)` is 12 m of 6.35 mm. */
export interface Pipe {
  name?: string;
  parent?: string;
  odMm?: number;
  lengthM: number;
  riseM?: number | null;
  bends?: number;
  equivalentMPerBend?: number;
}
export const pipe = (lengthM: number, odMm = 6.35, more: Partial<Pipe> = {}): Pipe => ({ lengthM, odMm, ...more });

export function lineSetOf(pipes: readonly Pipe[]): LineSetRequest {
  return {
    branches: pipes.map(({ odMm = 6.35, name, ...rest }, index) => ({
      ...rest,
      name: name ?? String.fromCharCode(65 + index),
      liquidOdMm: odMm,
    })),
  };
}

/**
 * The invented unit of the tests: R-32, 1,200 g, 7.5 m pre-charged, 20 g/m. What a test is not about is left out of the
 * request: no limits, no rounding.
 */
export function request(
  basis: Partial<ChargeBasis>,
  pipes: readonly Pipe[] = [pipe(12)],
  more: Partial<ChargeRequest> = {},
): ChargeRequest {
  return chargeRequest.parse({
    job: 'newInstall',
    basis: {
      refrigerant: 'R-32',
      factoryChargeG: 1200,
      precharge: { scope: 'system', lengthM: 7.5 },
      rate: { kind: 'flat', gPerM: 20 },
      ...basis,
    },
    lineSet: lineSetOf(pipes),
    gwpSet: 'AR4',
    ...more,
  });
}

const context = { reference: referenceData, compileFormula };

export const outcomeOf = (asked: ChargeRequest) => calculateCharge(asked, context);

export function charge(...asked: Parameters<typeof request>): ChargeResult {
  return requireValue(outcomeOf(request(...asked)));
}
export const extraG = (...asked: Parameters<typeof request>): number => charge(...asked).extraG;

/** The refusals of a request that must be refused. */
export function refusalsOf(...asked: Parameters<typeof request>): readonly Refusal[] {
  const outcome = outcomeOf(request(...asked));
  if (outcome.ok) throw new Error(`expected a refusal, got ${outcome.value.extraG} g`);
  return outcome.refusals;
}
/** `code path` of each refusal. */
export const refused = (...asked: Parameters<typeof request>): string[] =>
  refusalsOf(...asked).map(({ code, path }) => `${code} ${path}`);

export const warningsOf = (...asked: Parameters<typeof request>): string[] =>
  charge(...asked).warnings.map(({ code }) => code);
