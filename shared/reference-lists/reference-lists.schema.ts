import { z } from 'zod';
import { SAFETY_CLASSES } from '../reference/refrigerant.ts';

/** What the screens choose from; the whole tables stay with the calculations. */
export const refrigerantList = z.strictObject({
  items: z.array(
    z.strictObject({
      designation: z.string(),
      type: z.string(),
      safetyClass: z.enum(SAFETY_CLASSES),
      blend: z.boolean(),
      glideClass: z.string(),
      /** Whether saturation and density are known for it. */
      hasSaturation: z.boolean(),
    }),
  ),
  version: z.string(),
});
export const tubeList = z.strictObject({
  items: z.array(
    z.strictObject({
      standard: z.string(),
      nominal: z.string(),
      temper: z.string(),
      odMm: z.number(),
      wallMm: z.number(),
      idMm: z.number(),
    }),
  ),
  version: z.string(),
});
export const jointList = z.strictObject({
  items: z.array(
    z.strictObject({
      nominal: z.string(),
      odMm: z.number(),
      torqueMinNm: z.number(),
      torqueMaxNm: z.number(),
      torqueMinFtLbf: z.number(),
      torqueMaxFtLbf: z.number(),
      status: z.string(),
      source: z.string(),
    }),
  ),
  version: z.string(),
});
