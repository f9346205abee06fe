import { z } from 'zod';
import { returned } from '../calculations/decimals.ts';

/** A scale that was zeroed reads below zero. */
export const readingG = z.number().min(-100_000_000).max(100_000_000);

/** What is known of the scale; both zero where absent. */
export const scaleFields = {
  resolutionG: z.number().positive().max(100_000).describe('smallest step of the display'),
  repeatabilityG: z.number().min(0).max(100_000).nullish().describe('standard deviation of repeated weighings'),
  spanErrorRelative: z
    .number()
    .min(0)
    .max(0.1)
    .nullish()
    .describe('largest relative error of the span: 0.001 is 0.1 %'),
};

/** `POST /calculations/net-mass`: one net mass from two readings of one scale. */
export const netMassRequest = z.strictObject({ beforeG: readingG, afterG: readingG, ...scaleFields });
export type NetMassRequest = z.output<typeof netMassRequest>;

export const netMassResponse = z.strictObject({
  netG: returned('g', 'before minus after'),
  standardUncertaintyG: returned('g'),
  expandedUncertaintyG: returned('g', 'k = 2'),
});
export type NetMassResponse = z.output<typeof netMassResponse>;
