import type { MessageParams } from '../calculations/say-messages.ts';
import type { ChargeResponse } from './charge.schema.ts';
import type { ChargeResult, ChargeStep } from './charge-result.ts';

/** A sentence of the catalogue by its key. */
export type Say = (key: string, params: MessageParams) => string;

/** The result as it is answered and shown: every code said in the reader's language. */
export function presentCharge(result: ChargeResult, say: Say): ChargeResponse {
  return {
    extraG: result.extraG,
    totalG: result.totalG,
    weighInG: result.weighInG,
    recoverG: result.recoverG,
    co2eT: result.co2eT,
    gwpSet: result.gwpSet,
    ratePlausibility: result.ratePlausibility,
    steps: result.steps.map((step) => ({
      label: labelOf(step, say),
      expression: step.expression,
      value: step.value,
      unit: step.unit,
      source: say(`source.${step.source.code}`, step.source.params),
    })),
    warnings: result.warnings.map(({ code, params }) => ({ code, message: say(`warning.${code}`, params) })),
    cautions: result.cautions.map(({ code, signal, params }) => ({
      code,
      signal,
      message: say(`caution.${code}`, params),
    })),
    versions: result.versions,
  };
}

function labelOf(step: ChargeStep, say: Say): string {
  const label = say(`step.${step.code}`, step.params);
  return step.of === 'previousLineSet' ? say('step.ofPreviousLineSet', { label }) : label;
}
