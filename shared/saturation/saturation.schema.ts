import { z } from 'zod';
import { returned } from '../calculations/decimals.ts';
import { cautionsField, refrigerantField, tempCField } from '../calculations/fields.ts';

/** `POST /calculations/saturation`: one of the two; the other is null or absent. */
export const saturationRequest = z.strictObject({
  refrigerant: refrigerantField,
  pressureKPaAbs: z.number().positive().max(20_000).nullish(),
  tempC: tempCField.nullish(),
});
export type SaturationRequest = z.output<typeof saturationRequest>;

const densities = {
  liquidDensityKgM3: returned('kg/m3', 'saturated liquid at the bubble point'),
  vapourDensityKgM3: returned('kg/m3', 'saturated vapour at the dew point'),
  cautions: cautionsField,
};

export const saturationResponse = z.union([
  z.strictObject({ bubbleC: returned('°C'), dewC: returned('°C'), ...densities }),
  z.strictObject({ bubbleKPaAbs: returned('kPa', 'absolute'), dewKPaAbs: returned('kPa', 'absolute'), ...densities }),
]);
export type SaturationResponse = z.output<typeof saturationResponse>;
