import { z } from 'zod';
import { returned } from '../calculations/decimals.ts';
import { readingG, scaleFields } from './net-mass.schema.ts';

/** `POST /calculations/reconcile`: what left a cylinder against what was issued from it. */
export const reconcileRequest = z.strictObject({
  ...scaleFields,
  startGrossG: readingG,
  endGrossG: readingG,
  issuedG: z
    .array(z.number().min(0).max(100_000_000))
    .max(1000)
    .describe('each from its own pair of readings; those that share a reading are one'),
});
export type ReconcileRequest = z.output<typeof reconcileRequest>;

export const reconcileResponse = z.strictObject({
  differenceG: returned('g', 'what left the cylinder minus what was issued'),
  standardUncertaintyG: returned('g'),
  verdict: z.enum(['withinScales', 'lookAgain', 'notExplained']).describe('below 2 u, up to and with 3 u, beyond'),
});
export type ReconcileResponse = z.output<typeof reconcileResponse>;
