import type { ReferenceData } from '../reference/reference-data.ts';
import { calculateCharge } from './calculate-charge.ts';
import type { ChargeRequest } from './charge.schema.ts';
import { chargeRequest, chargeResponse } from './charge.schema.ts';
import { compileFormula } from './formula.ts';
import { presentCharge } from './present-charge.ts';

/**
 * The call as the server mounts it, formulas included. It stands beside the other calculations because its steps carry
 * sentences too (`present`), and because its formula parser is too heavy for a registry that a browser may import.
 */
export const chargeCalculation = {
  path: '/calculations/charge',
  summary: 'Refrigerant to weigh in for a line set, by what the manual says',
  description:
    'Refuses to guess: a length or height outside the limits, a size without a rate, brackets that end short, mixed ' +
    'sizes under one pre-charged length without an order, an unknown name in a formula give every refusal found and no ' +
    'figure. Every step of the arithmetic is returned.',
  request: chargeRequest,
  response: chargeResponse,
  /** Pure. Codes and values in place of sentences: `present` says them. */
  calculate: (request: ChargeRequest, reference: ReferenceData) =>
    calculateCharge(request, { reference, compileFormula }),
  present: presentCharge,
} as const;
