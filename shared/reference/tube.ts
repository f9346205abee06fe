import { z } from 'zod';

/** One row of `data/tubes.json`. */
export const tube = z.strictObject({
  standard: z.enum(['ASTM B280', 'EN 12735-1']),
  nominal: z.string(),
  temper: z.string(),
  odMm: z.number().positive(),
  wallMm: z.number().positive(),
  idMm: z.number().positive(),
  internalAreaMm2: z.number().positive(),
  internalVolumeLPerM: z.number().positive(),
  status: z.enum(['yes', 'memory']),
  source: z.string().min(1),
  note: z.string().nullable(),
});
export type Tube = z.output<typeof tube>;
