import { useQuery } from '@tanstack/react-query';
import {
  heldOrMeant,
  limitingRefrigerant,
  pressingMost,
  ratingPressureKPaGauge,
} from '../../../shared/cylinder-fill/cylinder-limits.ts';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
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
  /** The lightest of what is in it, which the limit follows; while it is empty what it is meant for. */
  limitingRefrigerant: string;
  /** What in it presses most at 55 °C. */
  hottest: string;
  /** What that presses there, gauge; null where it is not known. */
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
  byRefrigerant?: Cylinder['byRefrigerant'];
}): CylinderFigures {
  const { kind, waterCapacityG } = cylinder;
  const held = (cylinder.byRefrigerant ?? []).filter(({ massG }) => massG > 0).map((each) => each.refrigerant);
  const refrigerant = limitingRefrigerant(cylinder.refrigerant, held) ?? cylinder.refrigerant;
  const hottest = pressingMost(heldOrMeant(cylinder.refrigerant, held));
  const hasRule = kind !== 'nonRefillable' && waterCapacityG !== null && waterCapacityG > 0 && refrigerant !== '';
  const fill = useQuery({
    ...calculationQueries.cylinderFill({ refrigerant, waterCapacityG: waterCapacityG ?? 1, tareG: 0 }),
    enabled: hasRule,
  }).data;
  const shop = useQuery({
    ...calculationQueries.saturationAt(refrigerant, HEEL_TEMP_C),
    enabled: refrigerant !== '' && waterCapacityG !== null,
  }).data;
  return {
    ruleLimitG: hasRule ? (fill?.maxNetG ?? null) : null,
    liquidDensityKgM3: fill?.liquidDensityKgM3 ?? null,
    limitingRefrigerant: refrigerant,
    hottest,
    pressureAt55KPaGauge: ratingPressureKPaGauge(hottest),
    heelG: shop && waterCapacityG !== null ? (waterCapacityG / 1000 / WATER_KG_PER_L) * shop.vapourDensityKgM3 : null,
    cautions: fill?.cautions ?? [],
  };
}
