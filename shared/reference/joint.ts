import { z } from 'zod';

/** One row of `data/joints.json`: a flare joint by tube size, general table; the unit's manual governs. */
export const flareJoint = z.strictObject({
  nominal: z.string(),
  odMm: z.number().positive(),
  usualWallMm: z.number().positive(),
  torqueMinNm: z.number().positive(),
  torqueMaxNm: z.number().positive(),
  torqueMinFtLbf: z.number().positive(),
  torqueMaxFtLbf: z.number().positive(),
  acrossFlatsMmR410AR32: z.number().positive(),
  acrossFlatsMmR22R407C: z.number().positive(),
  flareDiameterMinMmR410AR32: z.number().positive(),
  flareDiameterMaxMmR410AR32: z.number().positive(),
  flareDiameterMinMmR22R407C: z.number().positive(),
  flareDiameterMaxMmR22R407C: z.number().positive(),
  tightenAngleAfterSnugDeg: z.string(),
  status: z.enum(['yes', 'partly']),
  source: z.string().min(1),
  note: z.string().nullable(),
});
export type FlareJoint = z.output<typeof flareJoint>;
