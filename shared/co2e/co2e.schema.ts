import { z } from 'zod';
import { returned } from '../calculations/decimals.ts';
import { massGField, refrigerantField } from '../calculations/fields.ts';
import { gwpSet } from '../reference/gwp.ts';

/** `POST /calculations/co2e`. */
export const co2eRequest = z.strictObject({ refrigerant: refrigerantField, massG: massGField, gwpSet });
export type Co2eRequest = z.output<typeof co2eRequest>;

export const co2eResponse = z.strictObject({
  co2eT: returned('t', 'CO2 equivalent'),
  gwpValue: returned('GWP', '100 years, unrounded sum over the composition by mass'),
  source: z.string().describe('the set and the sum that gave the value'),
});
export type Co2eResponse = z.output<typeof co2eResponse>;
