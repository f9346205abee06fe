import { z } from 'zod';
import { returned } from '../calculations/decimals.ts';
import {
  altitudeMField,
  atmosphereKPaAbsField,
  cautionsField,
  kPaGaugeField,
  refrigerantField,
  tempCField,
} from '../calculations/fields.ts';

const side = z.strictObject({ kPaGauge: kPaGaugeField, lineTempC: tempCField });

/** `POST /calculations/superheat-subcooling`: suction, liquid or both; atmosphere by pressure or by altitude. */
export const superheatSubcoolingRequest = z.strictObject({
  refrigerant: refrigerantField,
  suction: side.nullish(),
  liquid: side.nullish(),
  atmosphereKPaAbs: atmosphereKPaAbsField.nullish(),
  altitudeM: altitudeMField.nullish(),
});
export type SuperheatSubcoolingRequest = z.output<typeof superheatSubcoolingRequest>;

export const superheatSubcoolingResponse = z.strictObject({
  dewC: returned('°C', 'at the suction pressure').nullable(),
  superheatK: returned('K').nullable(),
  bubbleC: returned('°C', 'at the liquid pressure').nullable(),
  subcoolingK: returned('K').nullable(),
  cautions: cautionsField,
});
export type SuperheatSubcoolingResponse = z.output<typeof superheatSubcoolingResponse>;
