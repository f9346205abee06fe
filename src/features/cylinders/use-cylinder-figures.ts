import { useQuery } from '@tanstack/react-query';
import { STANDARD_ATMOSPHERE_KPA } from '../../../shared/units/factors.ts';
import { calculationQueries } from '../../api/calculations.ts';

/** A pressure rating is held against the refrigerant's pressure at this temperature. */
export const RATING_TEMP_C = 55;
/** A shop's room temperature: below the mass of its saturated vapour a cylinder holds no liquid any more. */
export const HEEL_TEMP_C = 21;
/** kg of water to L: the water capacity is stamped as a mass of water. */
const WATER_KG_PER_L = 1;

export interface CylinderFigures {
  /** By the published rule; null without a water capacity, or where there is no rule. */
  ruleLimitG: number | null;
  liquidDensityKgM3: number | null;
  /** What the refrigerant presses at 55 °C, gauge; null while it is not known. */
  pressureAt55KPaGauge: number | null;
  /** What stays as vapour when the last liquid is gone; null without a water capacity. */
  heelG: number | null;
  cautions: readonly { code: string; signal: 'danger' | 'warning' | 'caution' | 'notice'; message: string }[];
}

/** What follows from a cylinder's stamps and its refrigerant, by the same formulas as the server's. */
export function useCylinderFigures(cylinder: {
  kind: string;
  refrigerant: string;
  waterCapacityG: number | null;
}): CylinderFigures {
  const { kind, refrigerant, waterCapacityG } = cylinder;
  const hasRule = kind !== 'nonRefillable' && waterCapacityG !== null && waterCapacityG > 0 && refrigerant !== '';
  const fill = useQuery({
    ...calculationQueries.cylinderFill({ refrigerant, waterCapacityG: waterCapacityG ?? 1, tareG: 0 }),
    enabled: hasRule,
  }).data;
  const hot = useQuery({
    ...calculationQueries.saturationAt(refrigerant, RATING_TEMP_C),
    enabled: refrigerant !== '',
  }).data;
  const shop = useQuery({
    ...calculationQueries.saturationAt(refrigerant, HEEL_TEMP_C),
    enabled: refrigerant !== '' && waterCapacityG !== null,
  }).data;
  return {
    ruleLimitG: hasRule ? (fill?.maxNetG ?? null) : null,
    liquidDensityKgM3: fill?.liquidDensityKgM3 ?? null,
    pressureAt55KPaGauge: hot ? hot.bubbleKPaAbs - STANDARD_ATMOSPHERE_KPA : null,
    heelG: shop && waterCapacityG !== null ? (waterCapacityG / 1000 / WATER_KG_PER_L) * shop.vapourDensityKgM3 : null,
    cautions: fill?.cautions ?? [],
  };
}
