import { z } from 'zod';

export const GWP_SETS = ['AR4', 'AR5', 'AR6', 'US-AIM', 'US-84.64', 'EU-2024-573'] as const;
export const gwpSet = z.enum(GWP_SETS);
export type GwpSet = z.output<typeof gwpSet>;

const value = z.number().min(0).nullable();

/** 100-year GWP of one component in each set; null: the set has no value for it. */
export const gwpComponent = z.strictObject({
  component: z.string().min(1),
  gwp: z.strictObject({ AR4: value, AR5: value, AR6: value, 'US-AIM': value, 'US-84.64': value, 'EU-2024-573': value }),
  /** The sets whose value was written from memory; all others were read in the source. */
  fromMemory: z.array(gwpSet),
  source: z.string().min(1),
});
export type GwpComponent = z.output<typeof gwpComponent>;
