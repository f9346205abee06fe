import { z } from 'zod';

const column = z.array(z.number().positive());

/** One file of `data/saturation/`: columns over `minTempC + i * stepK`. Pressures absolute; blends at nominal composition. */
export const saturationTable = z.strictObject({
  designation: z.string(),
  version: z.string(),
  source: z.string().min(1),
  status: z.literal('computed'),
  confidence: z.enum(['high', 'good', 'low']),
  note: z.string().nullable(),
  minTempC: z.number().int(),
  stepK: z.literal(1),
  bubbleKPaAbs: column,
  dewKPaAbs: column,
  liquidDensityKgM3: column,
  vapourDensityKgM3: column,
});
export type SaturationTable = z.output<typeof saturationTable>;
