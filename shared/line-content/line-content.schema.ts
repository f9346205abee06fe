import { z } from 'zod';
import { returned } from '../calculations/decimals.ts';
import { cautionsField, lengthMField, refrigerantField, tempCField } from '../calculations/fields.ts';

/** `POST /calculations/line-content`: what a pipe holds when it is full of one phase. */
export const lineContentRequest = z.strictObject({
  refrigerant: refrigerantField,
  phase: z.enum(['liquid', 'vapour']),
  tempC: tempCField.describe('of the liquid, or the saturation temperature of the vapour'),
  odMm: z.number().positive().max(500),
  wallMm: z.number().positive().max(50),
  lengthM: lengthMField,
});
export type LineContentRequest = z.output<typeof lineContentRequest>;

export const lineContentResponse = z.strictObject({
  densityKgM3: returned('kg/m3'),
  gPerM: returned('g/m'),
  contentG: returned('g'),
  cautions: cautionsField,
});
export type LineContentResponse = z.output<typeof lineContentResponse>;
