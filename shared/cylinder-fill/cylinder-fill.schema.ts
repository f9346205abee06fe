import { z } from 'zod';
import { returned } from '../calculations/decimals.ts';
import { cautionsField, refrigerantField } from '../calculations/fields.ts';

const massG = z.number().min(0).max(2_000_000_000);

/** `POST /calculations/cylinder-fill`: the most that a recovery cylinder may hold. */
export const cylinderFillRequest = z.strictObject({
  refrigerant: refrigerantField.describe('mixed or not known: the lightest of those that it may be'),
  waterCapacityG: z
    .number()
    .positive()
    .max(2_000_000_000)
    .describe('WC as stamped on the cylinder, as a mass of water'),
  tareG: massG,
  grossG: massG.nullish(),
  specificGravity: z
    .number()
    .min(0.3)
    .max(2)
    .nullish()
    .describe('liquid at 25 °C against 1,000 kg/m3; from the table where absent'),
  fillFactor: z.number().positive().max(0.8).nullish().describe('0.8 where absent'),
});
export type CylinderFillRequest = z.output<typeof cylinderFillRequest>;

export const cylinderFillResponse = z.strictObject({
  liquidDensityKgM3: returned('kg/m3', 'as used, at 25 °C'),
  maxNetG: returned('g'),
  maxGrossG: returned('g'),
  contentG: returned('g', 'null without a gross reading').nullable(),
  roomLeftG: returned('g', 'below zero: overfilled; null without a gross reading').nullable(),
  cautions: cautionsField,
});
export type CylinderFillResponse = z.output<typeof cylinderFillResponse>;
