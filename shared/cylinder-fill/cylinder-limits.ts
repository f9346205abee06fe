import type { ReferenceData } from '../reference/reference-data.ts';
import { saturationKPaAbs } from '../reference/saturation.ts';
import { STANDARD_ATMOSPHERE_KPA } from '../units/factors.ts';
import { gramsOfMicrograms, type Micrograms, microgramsOfGrams } from '../units/mass.ts';
import { cylinderFill } from './cylinder-fill.ts';

/** A cylinder's pressure rating is held against the refrigerant's pressure at this temperature. */
export const RATING_TEMP_C = 55;

/**
 * Largest net content that the books hold a cylinder to: the stamped limit, else for refillable and recovery cylinders
 * the published rule, 0.8 x water capacity x liquid density at 25 °C (`cylinderFill`). Null: no limit, or not known.
 */
export function cylinderLimit(
  cylinder: {
    kind: 'refillable' | 'nonRefillable' | 'recovery';
    refrigerant: string;
    stampedLimitMicrograms: bigint | null;
    waterCapacityMicrograms: bigint | null;
  },
  reference: ReferenceData,
): Micrograms | null {
  const { kind, refrigerant, stampedLimitMicrograms, waterCapacityMicrograms } = cylinder;
  if (stampedLimitMicrograms !== null) return stampedLimitMicrograms as Micrograms;
  if (kind === 'nonRefillable' || waterCapacityMicrograms === null) return null;
  const waterCapacityG = gramsOfMicrograms(waterCapacityMicrograms);
  const fill = cylinderFill({ refrigerant, waterCapacityG, tareG: 0 }, reference);
  const limit = fill.ok ? microgramsOfGrams(fill.value.maxNetG) : null;
  return limit !== null && limit > 0n ? limit : null;
}

/**
 * Does the service pressure (kPa gauge) bear the refrigerant at 55 °C, over a standard atmosphere? The liquid's bubble
 * pressure counts. Null: no service pressure, or no table up to there.
 */
export function pressureRatingHolds(
  servicePressureKPaGauge: number | null,
  refrigerant: string,
  reference: Pick<ReferenceData, 'findSaturationTable'>,
): boolean | null {
  const table = reference.findSaturationTable(refrigerant);
  if (servicePressureKPaGauge === null || table === null) return null;
  const pressure = saturationKPaAbs(table, 'bubble', RATING_TEMP_C, { path: '/refrigerant' });
  return pressure.ok ? pressure.value - STANDARD_ATMOSPHERE_KPA <= servicePressureKPaGauge : null;
}
